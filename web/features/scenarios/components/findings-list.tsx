import { CircleAlert, CircleCheck, OctagonAlert } from 'lucide-react';
import type { TrackFinding } from '#contract/scenarios.ts';
import { classNames } from '../../../lib/class-names.ts';
import { Checkbox } from '../../../ui/field.tsx';

interface FindingsListProps {
  findings: readonly TrackFinding[];
  /** What the service filled, said once. */
  filled: string | null;
  onShow: (fix: number) => void;
  consent: { given: boolean; onGive: (given: boolean) => void };
}

const LOOKS = {
  refuse: { icon: OctagonAlert, colour: 'text-error', word: 'Can’t be saved' },
  consent: { icon: CircleAlert, colour: 'text-caution', word: 'Needs your consent' },
  note: { icon: CircleAlert, colour: 'text-caution', word: 'Noted' },
} as const;

/** What the checks found: seen, why it matters, what to do; refusals first. */
export function FindingsList({ findings, filled, onShow, consent }: FindingsListProps) {
  const order = ['refuse', 'consent', 'note'] as const;
  const sorted = [...findings].sort((a, b) => order.indexOf(a.severity) - order.indexOf(b.severity));
  const needsConsent = findings.some(({ severity }) => severity === 'consent') || consent.given;
  return (
    <ul className="divide-y divide-rule" aria-label="Findings">
      {sorted.map((finding) => {
        const { icon: Icon, colour, word } = LOOKS[finding.severity];
        const { fix } = finding;
        return (
          <li key={`${finding.code}-${fix}-${finding.text}`} className="flex gap-2.5 px-4 py-2.5 text-13 leading-snug">
            <Icon size={17} strokeWidth={1.75} className={classNames('mt-px flex-none', colour)} aria-hidden />
            <span className="min-w-0 flex-1">
              <b>{word}.</b> {finding.text} <span className="text-12 text-ink-2">{finding.code}</span>
            </span>
            {fix !== null && (
              <button
                type="button"
                className="flex-none self-start font-bold text-link hover:underline"
                onClick={() => onShow(fix)}
              >
                Show
              </button>
            )}
          </li>
        );
      })}
      {needsConsent && (
        <li className="px-4 py-2.5 text-13">
          <Checkbox
            label="Put the fixes in time order"
            hint="Without this a track out of order isn’t saved."
            checked={consent.given}
            onChange={(event) => consent.onGive(event.target.checked)}
          />
        </li>
      )}
      {filled && (
        <li className="flex gap-2.5 px-4 py-2.5 text-13 leading-snug">
          <CircleAlert size={17} strokeWidth={1.75} className="mt-px flex-none text-caution" aria-hidden />
          <span>{filled}</span>
        </li>
      )}
      {findings.length === 0 && (
        <li className="flex gap-2.5 px-4 py-2.5 text-13 leading-snug">
          <CircleCheck size={17} strokeWidth={1.75} className="mt-px flex-none text-done" aria-hidden />
          <b>Order, speed and pressure are consistent.</b>
        </li>
      )}
    </ul>
  );
}
