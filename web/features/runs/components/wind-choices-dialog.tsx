import { useState } from 'react';
import { RotateCcw } from 'lucide-react';
import { WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { WindChoices } from '#contract/wind-choices.ts';
import { Button } from '../../../ui/button.tsx';
import { ChoicesForm } from '../../../ui/choices-form.tsx';
import { Dialog } from '../../../ui/dialog.tsx';

interface WindChoicesDialogProps {
  chosen: WindChoices;
  onChoose: (choices: WindChoices) => void;
  onClose: () => void;
}

export const DEFAULT_CHOICES: WindChoices = WindChoices.parse({});

/** The published relations a run may be computed with; they count once the dialog is confirmed. */
export function WindChoicesDialog({ chosen, onChoose, onClose }: WindChoicesDialogProps) {
  const [draft, setDraft] = useState(chosen);
  return (
    <Dialog
      open
      onClose={onClose}
      title="Wind field choices"
      actions={
        <>
          <Button onClick={onClose}>Keep as it was</Button>
          <Button icon={RotateCcw} onClick={() => setDraft(DEFAULT_CHOICES)}>
            All default
          </Button>
          <Button
            variant="filled"
            onClick={() => {
              onChoose(draft);
              onClose();
            }}
          >
            Use these
          </Button>
        </>
      }
    >
      <p className="mb-2 text-13 text-ink-2">
        Each choice has a default with a reason. What a choice does to this track can be seen on the track’s own page,
        under “Settings, one at a time”.
      </p>
      <div className="-mx-5 max-h-[50vh] overflow-y-auto border-t border-rule">
        <ChoicesForm
          choices={WIND_CHOICES}
          value={(key) => draft[key]}
          onChange={(key, value) => {
            const next = WindChoices.safeParse({ ...draft, [key]: value });
            if (next.success) setDraft(next.data);
          }}
        />
      </div>
    </Dialog>
  );
}
