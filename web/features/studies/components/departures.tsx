import { RotateCcw } from 'lucide-react';
import type { ChainSettings } from '#contract/studies.ts';
import { counted } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { DEFAULT_SETTINGS, departuresOf, settingText } from '../chain-settings.ts';

interface DeparturesProps {
  settings: ChainSettings;
  onChange: (settings: ChainSettings) => void;
}

/** Which settings aren’t at their default, in words, and the way back. */
export function Departures({ settings, onChange }: DeparturesProps) {
  const changed = departuresOf(settings);
  if (changed.length === 0) return null;
  return (
    <div className="flex flex-wrap items-center gap-x-3 gap-y-1.5 rounded-2 bg-caution-tint px-3.5 py-2 text-13">
      <p className="min-w-0 flex-1 basis-60">
        <b>{counted(changed.length, 'setting')} changed, as a draft.</b> {changed.map(settingText).join('; ')}. Nothing
        is saved, and no run follows it.
      </p>
      <Button size="small" icon={RotateCcw} onClick={() => onChange(DEFAULT_SETTINGS)}>
        Back to every default
      </Button>
    </div>
  );
}
