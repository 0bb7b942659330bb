import { useState, type ReactNode } from 'react';
import { Check } from 'lucide-react';
import { classNames } from '../../../lib/class-names.ts';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';

export interface Choice {
  id: string;
  title: ReactNode;
  detail?: ReactNode;
  aside?: ReactNode;
}

interface ChoiceDialogProps {
  title: string;
  choices: readonly Choice[];
  chosen: readonly string[];
  /** Several may be taken together, up to this many. */
  most?: number;
  /** What to do when there is nothing to choose from. */
  empty: ReactNode;
  onChoose: (ids: string[]) => void;
  onClose: () => void;
}

/** One or several of a list; the choice counts when the dialog is confirmed. */
export function ChoiceDialog({ title, choices, chosen, most = 1, empty, onChoose, onClose }: ChoiceDialogProps) {
  const [picked, setPicked] = useState<readonly string[]>(chosen);
  const many = most > 1;
  const pick = (id: string) => {
    if (!many) return setPicked([id]);
    setPicked((before) => (before.includes(id) ? before.filter((other) => other !== id) : [...before, id]));
  };
  const fault =
    picked.length === 0 ? 'nothing chosen yet' : picked.length > most ? `at most ${most} tracks in one run` : undefined;
  return (
    <Dialog
      open
      onClose={onClose}
      title={title}
      actions={
        choices.length > 0 ? (
          <>
            <Button onClick={onClose}>Keep as it is</Button>
            <Button
              variant="filled"
              disabledReason={fault}
              onClick={() => {
                onChoose([...picked]);
                onClose();
              }}
            >
              {many ? `Use ${picked.length === 1 ? 'this track' : `these ${picked.length} tracks`}` : 'Use this one'}
            </Button>
          </>
        ) : (
          <Button onClick={onClose}>Close</Button>
        )
      }
    >
      {choices.length === 0 ? (
        <div className="text-ink-2">{empty}</div>
      ) : (
        <ul className="-mx-2 flex max-h-[55vh] flex-col gap-1 overflow-y-auto">
          {choices.map((choice) => {
            const isPicked = picked.includes(choice.id);
            return (
              <li key={choice.id}>
                <label
                  className={classNames(
                    'flex cursor-pointer items-center gap-3 rounded-2 px-2.5 py-2 has-focus-visible:outline-2 has-focus-visible:-outline-offset-2 has-focus-visible:outline-(--focus)',
                    isPicked ? 'bg-selected' : 'hover:bg-hover',
                  )}
                >
                  <input
                    type={many ? 'checkbox' : 'radio'}
                    name="choice"
                    className="sr-only"
                    checked={isPicked}
                    onChange={() => pick(choice.id)}
                  />
                  <span
                    aria-hidden
                    className={classNames(
                      'grid size-5 flex-none place-items-center border-[1.5px]',
                      many ? 'rounded-1' : 'rounded-pill',
                      isPicked ? 'border-action bg-action text-on-fill' : 'border-edge',
                    )}
                  >
                    {isPicked && <Check size={13} strokeWidth={3} />}
                  </span>
                  <span className="min-w-0 flex-1">
                    <span className="block font-bold">{choice.title}</span>
                    {choice.detail && <span className="block text-13 text-ink-2">{choice.detail}</span>}
                  </span>
                  {choice.aside}
                </label>
              </li>
            );
          })}
        </ul>
      )}
    </Dialog>
  );
}
