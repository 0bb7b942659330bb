import { useRef, useState, type KeyboardEvent } from 'react';
import { Check, Info, Pencil } from 'lucide-react';
import type { SpreadReply, SpreadRow } from '#contract/studies.ts';
import { classNames } from '../../../lib/class-names.ts';
import { columnScale } from '../../../lib/money.ts';
import { counted, decimal, decimalsFor, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { tickDecimals } from '../../../ui/charts/axis.ts';
import { signedAxis } from '../../../ui/charts/signed-axis.ts';
import { StepAxis, StepBar } from '../../../ui/charts/step-bar.tsx';
import { DEFAULT_SETTINGS, isSettingKey, valueOf, withValue } from '../chain-settings.ts';

interface SwitchRowsProps {
  reply: SpreadReply;
  /** Makes the other value of a row part of the base, and everything is worked out anew. */
  onTry: (row: SpreadRow) => void;
}

const WITHOUT_BARS = 'grid-cols-[minmax(0,1fr)_4.25rem_4.25rem]';
const WITH_BARS = '@3xl:grid-cols-[minmax(0,11.5rem)_minmax(0,13rem)_minmax(0,1fr)_3.5rem_minmax(0,1fr)_3.75rem]';
const GRID = classNames('grid items-center gap-x-2.5 px-4', WITHOUT_BARS, WITH_BARS);

const keyOf = ({ choice, to }: SpreadRow) => `${choice} ${to.value}`;

/** Whether the base of a row is the default, where there is one. */
const isDefault = ({ choice, from }: SpreadRow): boolean =>
  !isSettingKey(choice) || valueOf(DEFAULT_SETTINGS, choice) === from.value;

/** One row a switch, widest first; both columns of bars on axes they share. */
export function SwitchRows({ reply, onTry }: SwitchRowsProps) {
  const { label, toUnit } = useUnits();
  const [current, setCurrent] = useState(0);
  const list = useRef<HTMLDivElement>(null);
  const { rows, currency } = reply;
  const gusts = rows.map(({ peakGustChangeMs }) => (peakGustChangeMs === null ? null : toUnit(peakGustChangeMs)));
  const largest = Math.max(1, ...rows.map(({ grossChangeMinor }) => Math.abs(grossChangeMinor ?? 0)));
  const scale = currency === null ? null : columnScale(largest, currency);
  const gross = rows.map(({ grossChangeMinor }) =>
    scale === null || grossChangeMinor === null ? null : grossChangeMinor / scale.minor,
  );
  const gustAxis = signedAxis(gusts.map((change) => change ?? 0));
  const grossAxis = signedAxis(gross.map((change) => change ?? 0));
  const decimals = decimalsFor(scale === null ? 0 : largest / scale.minor);

  const moving = rows.filter(({ reason }) => reason === null).length;
  const rowLook = (index: number) =>
    classNames(
      GRID,
      'min-h-12 border-b border-rule py-1.5 last:border-b-0',
      index === current && 'bg-selected shadow-[inset_3px_0_var(--action)]',
    );
  const setting = (row: SpreadRow, index: number) => (
    <span role="cell" className="flex flex-wrap items-center gap-x-2 gap-y-0.5 @max-3xl:hidden">
      <Values row={row} />
      <TryButton {...{ row, index, current, onTry }} settings={reply.settings} onFocus={() => setCurrent(index)} />
      {index === current && <span className="basis-full text-12 leading-tight text-ink-2">{row.to.source}</span>}
    </span>
  );

  const move = (event: KeyboardEvent) => {
    const step = { ArrowDown: 1, ArrowUp: -1, Home: -rows.length, End: rows.length }[event.key];
    if (step === undefined || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    const next = Math.min(rows.length - 1, Math.max(0, current + step));
    setCurrent(next);
    list.current?.querySelector<HTMLElement>(`[data-row="${next}"]`)?.focus();
  };

  return (
    <section aria-label="Settings, one at a time" className="@container rounded-3 border border-rule bg-sheet shadow-1">
      <div
        ref={list}
        role="table"
        aria-label="What each setting does, changed alone"
        onKeyDown={move}
        className="text-14"
      >
        <div role="rowgroup">
          <div role="row" className={classNames(GRID, 'h-9 border-b border-rule-strong text-12 text-ink-2')}>
            <span role="columnheader">Setting, changed alone</span>
            <span role="columnheader" className="flex items-center gap-1.25 @max-3xl:hidden">
              <Check size={13} strokeWidth={2.8} className="text-done" aria-hidden />
              default <span className="ml-1">then the other</span>
            </span>
            <span role="columnheader" className="text-ink @max-3xl:text-right @3xl:col-span-2">
              <b>
                <span className="@max-3xl:hidden">Peak gust</span>
                <span className="@3xl:hidden">Gust</span>, {label}
              </b>
            </span>
            <span role="columnheader" className="text-ink @max-3xl:text-right @3xl:col-span-2">
              <b>
                <span className="@max-3xl:hidden">Event gross</span>
                <span className="@3xl:hidden">Gross</span>
                {scale && `, ${scale.header}`}
              </b>
            </span>
          </div>
        </div>
        <div role="rowgroup">
          {rows.slice(0, moving).map((row, index) => (
            <div key={keyOf(row)} role="row" className={rowLook(index)}>
              <span role="rowheader" className="leading-tight @max-3xl:pr-2">
                <b>{row.title}</b>
                <span className="mt-1 flex flex-wrap items-center gap-1.5 @3xl:hidden">
                  <Values row={row} />
                </span>
              </span>
              {setting(row, index)}
              <StepBar axis={gustAxis} change={gusts[index] ?? null} className="@max-3xl:hidden" />
              <b role="cell" className="text-right text-13 whitespace-nowrap">
                {gusts[index] == null ? '–' : signed(gusts[index], 1)}
              </b>
              <StepBar axis={grossAxis} change={gross[index] ?? null} className="@max-3xl:hidden" />
              <b role="cell" className="text-right text-13 whitespace-nowrap">
                {gross[index] == null ? '–' : signed(gross[index], decimals)}
              </b>
            </div>
          ))}
        </div>
        <div aria-hidden className={classNames(GRID, 'h-5.5 border-t border-rule-strong @max-3xl:hidden')}>
          <span className="col-span-2" />
          <StepAxis axis={gustAxis} format={(tick) => decimal(tick, tickDecimals(gustAxis))} />
          <span />
          <StepAxis axis={grossAxis} format={(tick) => decimal(tick, tickDecimals(grossAxis))} />
          <span />
        </div>
        {moving < rows.length && (
          <div role="rowgroup" className="border-t border-rule-strong">
            <div role="row">
              <span role="columnheader" className="block bg-well px-4 py-1.5 text-12 text-ink-2">
                No effect here, or not computed: {counted(rows.length - moving, 'setting')}
              </span>
            </div>
            {rows.slice(moving).map((row, offset) => (
              <div key={keyOf(row)} role="row" className={rowLook(moving + offset)}>
                <span role="rowheader" className="leading-tight @max-3xl:col-span-3">
                  <b>{row.title}</b>
                  <span className="mt-1 flex flex-wrap items-center gap-1.5 @3xl:hidden">
                    <Values row={row} />
                  </span>
                </span>
                {setting(row, moving + offset)}
                <span role="cell" className="text-12 leading-tight text-ink-2 @max-3xl:col-span-3 @3xl:col-span-4">
                  {row.reason}
                </span>
              </div>
            ))}
          </div>
        )}
      </div>
      <p className="flex gap-2 border-t border-rule px-4 pt-2.25 pb-2.75 text-13 text-ink-2">
        <Info size={15} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />
        <span>
          <b className="text-ink">Changes of the centre, one switch at a time.</b> They don’t add up; two switches
          together need a run of their own.
        </span>
      </p>
    </section>
  );
}

/** The base ticked and tinted, then the value tried. */
function Values({ row }: { row: SpreadRow }) {
  const byDefault = isDefault(row);
  const Icon = byDefault ? Check : Pencil;
  return (
    <>
      <span
        className={classNames(
          'inline-flex min-h-6 items-center gap-1.25 rounded-1 pr-2 pl-1.5 text-12 leading-tight font-bold',
          byDefault ? 'bg-done-tint text-done' : 'bg-caution-tint text-caution',
        )}
      >
        <Icon size={13} strokeWidth={byDefault ? 2.8 : 2} className="flex-none" aria-hidden />
        <span className="sr-only">{byDefault ? 'default ' : 'changed '}</span>
        {row.from.title}
      </span>
      <span className="text-12 @3xl:hidden" title={row.to.source}>
        {row.to.title}
      </span>
    </>
  );
}

interface TryButtonProps {
  row: SpreadRow;
  index: number;
  current: number;
  settings: SpreadReply['settings'];
  onFocus: () => void;
  onTry: (row: SpreadRow) => void;
}

/** Space takes the other value into the base. One stop of Tab for the whole list; arrows move inside. */
function TryButton({ row, index, current, settings, onFocus, onTry }: TryButtonProps) {
  const canTry = withValue(settings, row.choice, row.to.value) !== null;
  return (
    <button
      type="button"
      data-row={index}
      tabIndex={index === current ? 0 : -1}
      title={row.to.source}
      aria-disabled={!canTry || undefined}
      aria-label={canTry ? `Try ${row.to.title} for ${row.title}` : `${row.to.title}: chosen with the run, not here`}
      onFocus={onFocus}
      onClick={() => canTry && onTry(row)}
      className={classNames(
        'rounded-1 px-1 py-0.5 text-left text-12 pointer-coarse:min-h-11',
        canTry ? 'hover:bg-hover hover:underline' : 'cursor-default',
      )}
    >
      {row.to.title}
    </button>
  );
}
