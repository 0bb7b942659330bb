import { RotateCcw } from 'lucide-react';
import type { ChainSettings } from '#contract/studies.ts';
import { counted } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { ScrollArea } from '../../../ui/scroll-area.tsx';
import { CHOICES, DEFAULT_SETTINGS, departuresOf, valueOf, withValue } from '../chain-settings.ts';
import { ChoicesForm } from '../../../ui/choices-form.tsx';

export const CHOICES_ID = 'wind-field-choices';

interface ChoicesPanelProps {
  settings: ChainSettings;
  onSettings: (settings: ChainSettings) => void;
}

/** What B is drawn with; what differs from the defaults is marked. */
export function ChoicesPanel({ settings, onSettings }: ChoicesPanelProps) {
  const changed = departuresOf(settings).length;
  return (
    <section
      id={CHOICES_ID}
      aria-label="Settings of B"
      tabIndex={-1}
      className="flex min-h-0 flex-col rounded-3 border border-rule bg-sheet shadow-1 xl:sticky xl:top-0 xl:max-h-[calc(100vh-9rem)]"
    >
      <header className="flex flex-wrap items-center gap-2 border-b border-rule px-4 py-2.5">
        <h2 className="text-15">Settings of B</h2>
        {changed === 0 ? (
          <Chip tone="done">all default</Chip>
        ) : (
          <>
            <Chip tone="caution">{counted(changed, 'difference')}</Chip>
            <Button size="small" icon={RotateCcw} className="ml-auto" onClick={() => onSettings(DEFAULT_SETTINGS)}>
              Back to default
            </Button>
          </>
        )}
        {changed === 0 && (
          <p className="basis-full text-12 text-ink-2">
            Change one: the wind it gives (B) then stands beside that of the defaults (A).
          </p>
        )}
      </header>
      <ScrollArea label="List of the settings of B" className="min-h-0 overflow-y-auto">
        <ChoicesForm
          choices={CHOICES}
          value={(key) => valueOf(settings, key)}
          onChange={(key, value) => {
            const next = withValue(settings, key, value);
            if (next) onSettings(next);
          }}
        />
      </ScrollArea>
      <p className="border-t border-rule px-4 py-2 text-12 text-ink-2">
        The picture is over open sea without vortices, so choices on land, ground and vortices change nothing in it.
      </p>
    </section>
  );
}
