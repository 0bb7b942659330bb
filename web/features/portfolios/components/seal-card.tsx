import { useId, useState, type ReactNode } from 'react';
import {
  CircleCheck,
  CircleDollarSign,
  FileLock,
  Layers,
  Lock,
  Stamp,
  TriangleAlert,
  type LucideIcon,
} from 'lucide-react';
import type { Edition } from '#contract/portfolios.ts';
import { day } from '../../../lib/dates.ts';
import { shortMoney } from '../../../lib/money.ts';
import { counted, percent } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Checkbox, TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { useSealEdition } from '../edition-queries.ts';
import { controlVerdict, siteTiv } from '../reconciliation.ts';

interface SealCardProps {
  edition: Edition;
  canWrite: boolean;
  onSealed: () => void;
}

const today = () => new Date().toISOString().slice(0, 10);
const MIN_REASON = 3;

/** What stands between this draft and its seal, in the order in which it can be cleared. */
const blockerOf = (
  form: { asAt: string; heldTicked: boolean; heldReason: string; controlReason: string },
  needs: { answers: boolean; held: boolean; control: boolean },
  ready: number,
): string | null => {
  if (needs.answers) return 'A question about the file is open. Answer it in the checks.';
  if (ready === 0) return 'No row can be scored. Fix rows in the checks first.';
  if (form.asAt === '') return 'Say from which day the values are.';
  if (form.asAt > today()) return 'The day of the values lies ahead. Choose today or earlier.';
  if (needs.control && form.controlReason.trim().length < MIN_REASON) return 'Control totals differ: say why.';
  if (needs.held && !form.heldTicked) return 'Tick that held rows aren’t scored.';
  if (needs.held && form.heldReason.trim().length < MIN_REASON) return 'Say why rows stay held.';
  return null;
};

export function SealCard({ edition, canWrite, onSealed }: SealCardProps) {
  const seal = useSealEdition(edition.id);
  const [asAt, setAsAt] = useState(edition.asAt ?? today());
  const [heldTicked, setHeldTicked] = useState(false);
  const [heldReason, setHeldReason] = useState('');
  const [controlReason, setControlReason] = useState('');
  const titleId = useId();
  const sum = edition.reconciliation;
  if (!sum) return null;
  const verdict = controlVerdict(sum, edition);
  const needs = {
    answers: edition.messages.some(({ severity }) => severity === 'stop'),
    held: sum.held.rows > 0,
    control: verdict.state === 'differs',
  };
  const blocker = blockerOf({ asAt, heldTicked, heldReason, controlReason }, needs, sum.ready.rows + sum.notes.rows);
  const all = siteTiv(sum);
  const submit = () => {
    if (blocker || seal.isPending || !canWrite) return;
    seal
      .mutateAsync({
        asAt,
        heldReason: needs.held ? heldReason.trim() : null,
        controlReason: needs.control ? controlReason.trim() : null,
      })
      // A sealed edition has no seal card any more; the promise outlives it.
      .then(onSealed)
      .catch(() => undefined);
  };

  return (
    <form
      noValidate
      aria-labelledby={titleId}
      className="flex flex-col rounded-3 border border-rule-strong bg-sheet px-4.5 pt-3.5 pb-4.5 shadow-2 wide:sticky wide:top-0 wide:min-h-158 wide:self-start print:hidden"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
      onKeyDown={(event) => {
        if (event.key === 'Enter' && event.ctrlKey) submit();
      }}
    >
      <h2 id={titleId} className="mb-2.5 flex items-center gap-2.5 text-18">
        <Stamp size={20} strokeWidth={1.75} className="text-action" aria-hidden />
        Seal edition {edition.number}
      </h2>
      <TextField
        label="Values as at"
        aside="printed on every result"
        type="date"
        hint={asAt === '' ? undefined : day(asAt)}
        max={today()}
        value={asAt}
        onChange={(event) => setAsAt(event.target.value)}
        className="mb-3.5"
      />
      {needs.control && (
        <>
          <Message tone="caution" icon={TriangleAlert} title="Control totals differ" className="mb-3">
            {verdict.sentence}
          </Message>
          <TextField
            label="Why the totals differ"
            aside="on the readiness sheet"
            value={controlReason}
            onChange={(event) => setControlReason(event.target.value)}
            className="mb-3.5"
          />
        </>
      )}
      {needs.held && (
        <>
          <Checkbox
            className="mb-3.5 rounded-2 bg-caution-tint px-3 py-2.75"
            label={`I know ${counted(sum.held.rows, 'row')} ${sum.held.rows === 1 ? 'isn’t' : 'aren’t'} scored.`}
            hint={
              <span className="text-12 text-ink">
                {shortMoney(sum.held.tivMinor, edition.currency)}
                {all > 0 && `, ${percent(sum.held.tivMinor / all)} of TIV`}, repeated on every result.
              </span>
            }
            checked={heldTicked}
            onChange={(event) => setHeldTicked(event.target.checked)}
          />
          <TextField
            label="Reason"
            aside="on the readiness sheet"
            value={heldReason}
            onChange={(event) => setHeldReason(event.target.value)}
            className="mb-3.5"
          />
        </>
      )}
      <div className="border-t border-rule pt-3">
        <h3 className="mb-1.5 text-14 font-bold tracking-normal">What sealing does</h3>
        <ul className="text-13">
          <Effect icon={Lock}>
            Fixes the {counted(sum.fileRows, 'row')}
            {edition.fixes.length > 0 && ` and ${counted(edition.fixes.length, 'correction')}`}. A later change makes
            edition {edition.number + 1}.
          </Effect>
          <Effect icon={Layers}>
            Makes edition {edition.number} the current one. Earlier editions and their runs stay readable.
          </Effect>
          <Effect icon={FileLock}>
            Keeps your file as received, digest <b>{edition.file.digest.slice(0, 8)}</b>.
          </Effect>
          <Effect icon={CircleDollarSign}>Costs nothing. A run is quoted before it starts.</Effect>
        </ul>
      </div>
      <div className="mt-auto pt-4 max-rail:fixed max-rail:inset-x-0 max-rail:bottom-[calc(3.625rem+2.875rem)] max-rail:z-10 max-rail:flex max-rail:items-center max-rail:gap-2.5 max-rail:border-t max-rail:border-rule-strong max-rail:bg-sheet max-rail:px-3.5 max-rail:py-2.25">
        {seal.isError ? (
          <Message tone="error" className="mb-2.5 max-rail:mb-0 max-rail:flex-1">
            {seal.error.message}
          </Message>
        ) : (
          <p
            aria-live="polite"
            className={
              blocker
                ? 'mb-2.5 flex items-center gap-1.75 text-13 font-bold text-caution max-rail:mb-0 max-rail:flex-1 max-rail:text-12'
                : 'mb-2.5 flex items-center gap-1.75 text-13 font-bold text-done max-rail:mb-0 max-rail:flex-1 max-rail:text-12'
            }
          >
            {blocker ? (
              <TriangleAlert size={15} strokeWidth={1.75} className="flex-none" aria-hidden />
            ) : (
              <CircleCheck size={15} strokeWidth={1.75} className="flex-none" aria-hidden />
            )}
            {blocker ?? `${needs.held ? 'Held rows ticked. ' : ''}Nothing blocks sealing.`}
          </p>
        )}
        <Button
          type="submit"
          variant="filled"
          size="large"
          icon={Stamp}
          pending={seal.isPending}
          disabledReason={canWrite ? (blocker ?? undefined) : 'Auditors read only.'}
          reasonPlacement="none"
          className="w-full max-rail:h-11! max-rail:w-auto max-rail:text-14"
        >
          Seal edition {edition.number}
        </Button>
      </div>
    </form>
  );
}

function Effect({ icon: Icon, children }: { icon: LucideIcon; children: ReactNode }) {
  return (
    <li className="flex gap-2.5 py-1.5">
      <Icon size={16} strokeWidth={1.75} className="mt-px flex-none text-ink-2" aria-hidden />
      <span>{children}</span>
    </li>
  );
}
