import { useId, useState, type ReactNode } from 'react';
import { classNames } from '../../../lib/class-names.ts';
import { useUnits } from '../../../lib/units.tsx';
import { parseTime } from '../fix-columns.ts';
import { withAmbientPressure, type AveragingSeconds, type TrackDraft } from '../track-draft.ts';
import type { ChangeDraft } from '../use-draft.ts';

const AVERAGING: readonly { value: AveragingSeconds; label: string; note: string }[] = [
  { value: 60, label: '1 min', note: 'no conversion' },
  { value: 120, label: '2 min', note: 'converted to 1 min' },
  { value: 180, label: '3 min', note: 'converted to 1 min' },
  { value: 600, label: '10 min', note: 'converted to 1 min' },
];

interface DeclarationsStripProps {
  draft: TrackDraft;
  change: ChangeDraft;
  readOnly: boolean;
}

const INPUT =
  'w-full rounded-1 border border-transparent bg-transparent py-0.5 text-16 font-bold hover:border-edge focus:border-edge';

/** What the person declares about the numbers below: averaging, unit, times, pressure outside, source. */
export function DeclarationsStrip({ draft, change, readOnly }: DeclarationsStripProps) {
  const { label } = useUnits();
  const averagingId = useId();
  const undeclared = draft.windAveragingS === null;
  return (
    <div className="grid grid-cols-4 overflow-hidden rounded-3 border border-rule bg-sheet shadow-1 max-wide:grid-cols-2 max-rail:grid-cols-2">
      <Cell
        label={<label htmlFor={averagingId}>Wind averaging</label>}
        note={
          undeclared
            ? 'must be declared before saving'
            : AVERAGING.find(({ value }) => value === draft.windAveragingS)?.note
        }
        caution={undeclared}
      >
        <select
          id={averagingId}
          className={classNames(INPUT, '-ml-1 cursor-pointer', undeclared && 'border-caution text-caution')}
          aria-required
          disabled={readOnly}
          value={draft.windAveragingS ?? ''}
          onChange={(event) =>
            change((before) => ({ ...before, windAveragingS: Number(event.target.value) as AveragingSeconds }))
          }
        >
          {undeclared && <option value="">Declare it</option>}
          {AVERAGING.map((option) => (
            <option key={option.value} value={option.value}>
              {option.label}
            </option>
          ))}
        </select>
      </Cell>
      <Cell label="Wind unit" note="as shown and typed">
        <span className="block py-0.5 text-16 font-bold">{label}</span>
      </Cell>
      <AmbientPressure {...{ draft, change, readOnly }} />
      <SourceAndTime {...{ draft, change, readOnly }} />
    </div>
  );
}

function Cell({
  label,
  note,
  caution = false,
  children,
}: {
  label: ReactNode;
  note?: ReactNode;
  caution?: boolean;
  children: ReactNode;
}) {
  return (
    <div className="min-w-0 border-rule px-4 py-2.5 not-first:border-l max-wide:odd:border-l-0 max-wide:nth-[n+3]:border-t">
      <div className="text-12 text-ink-2">{label}</div>
      {children}
      {note && <div className={classNames('text-12', caution ? 'font-bold text-caution' : 'text-ink-2')}>{note}</div>}
    </div>
  );
}

/** One value when all fixes agree; typing one sets it on every fix. */
function AmbientPressure({ draft, change, readOnly }: DeclarationsStripProps) {
  const id = useId();
  const values = new Set(draft.fixes.map((fix) => fix.ambientPressureHpa));
  const common = values.size === 1 ? [...values][0]! : null;
  const [text, setText] = useState<string | null>(null);
  const shown = text ?? (common === null ? '' : String(common));
  const fault = text !== null && text.trim() !== '' && !/^\d{3,4}(\.\d+)?$/.test(text.trim());
  const note = fault
    ? 'type hPa, for example 1010'
    : values.size > 1
      ? 'differs by fix'
      : common === null
        ? 'standard 1,010 hPa filled'
        : 'hPa, set by you';
  return (
    <Cell label={<label htmlFor={id}>Pressure outside</label>} note={note} caution={fault}>
      <input
        id={id}
        className={classNames(INPUT, '-ml-1 px-1')}
        inputMode="decimal"
        readOnly={readOnly}
        value={shown}
        placeholder={values.size > 1 ? 'as given' : '1010'}
        onChange={(event) => setText(event.target.value)}
        onBlur={() => {
          if (text === null || fault) return;
          const value = text.trim() === '' ? null : Number(text);
          if (value !== common || values.size > 1) change((before) => withAmbientPressure(before, value));
          setText(null);
        }}
      />
    </Cell>
  );
}

function SourceAndTime({ draft, change, readOnly }: DeclarationsStripProps) {
  const id = useId();
  const [asOf, setAsOf] = useState<string | null>(null);
  const shownAsOf = asOf ?? draft.asOf?.slice(0, 16).replace('T', ' ') ?? '';
  const fault = asOf !== null && asOf.trim() !== '' && parseTime(asOf) === null;
  return (
    <Cell
      label={<label htmlFor={id}>Source</label>}
      note={
        <span className="flex items-center gap-1">
          <label htmlFor={`${id}-as-of`} className="flex-none">
            as of
          </label>
          <input
            id={`${id}-as-of`}
            className="min-w-0 flex-1 rounded-1 border border-transparent bg-transparent px-1 hover:border-edge focus:border-edge"
            placeholder="if an advisory, UTC"
            readOnly={readOnly}
            value={shownAsOf}
            aria-invalid={fault}
            onChange={(event) => setAsOf(event.target.value)}
            onBlur={() => {
              if (asOf === null || fault) return;
              change((before) => ({ ...before, asOf: asOf.trim() === '' ? null : parseTime(asOf) }));
              setAsOf(null);
            }}
          />
        </span>
      }
      caution={fault}
    >
      <input
        id={id}
        className={classNames(INPUT, '-ml-1 truncate px-1')}
        placeholder="where it comes from"
        maxLength={200}
        readOnly={readOnly}
        value={draft.source}
        onChange={(event) => change((before) => ({ ...before, source: event.target.value }))}
      />
    </Cell>
  );
}
