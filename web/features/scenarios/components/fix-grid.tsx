import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react';
import type { ResolvedFix } from '#contract/scenarios.ts';
import { classNames } from '../../../lib/class-names.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { FIX_COLUMNS, type FixColumn } from '../fix-columns.ts';
import { withFix, withFixMoved, type DraftFix } from '../track-draft.ts';
import type { ChangeDraft } from '../use-draft.ts';

interface FixGridProps {
  fixes: readonly DraftFix[];
  /** Same length as the fixes once resolved, else empty. */
  resolved: readonly ResolvedFix[];
  chosen: number;
  onChoose: (row: number) => void;
  change: ChangeDraft;
  readOnly: boolean;
}

interface Editing {
  row: number;
  column: number;
  text: string;
  fault: string | null;
  /** Started by typing: the caret stands behind the first character. */
  typed: boolean;
}

const NUDGES: Record<string, [northKm: number, eastKm: number]> = {
  ArrowUp: [1, 0],
  ArrowDown: [-1, 0],
  ArrowRight: [0, 1],
  ArrowLeft: [0, -1],
};

/**
 * The fixes as a grid: arrows move, F2 or Enter edits, Tab goes to the next cell, Delete clears, Ctrl-D fills down,
 * Alt-arrows move the fix 1 km on the ground.
 */
export function FixGrid({ fixes, resolved, chosen, onChoose, change, readOnly }: FixGridProps) {
  const { unit, label } = useUnits();
  const grid = useRef<HTMLTableElement>(null);
  const [column, setColumn] = useState(0);
  const [editing, setEditing] = useState<Editing | null>(null);
  /** The entry already taken or given up: leaving its field must not take it a second time. */
  const settled = useRef<Editing | null>(null);
  const faultId = useId();
  const lastRow = fixes.length - 1;
  const lastColumn = FIX_COLUMNS.length - 1;

  const focusCell = (row: number, at: number) =>
    grid.current?.querySelector<HTMLElement>(`[data-cell="${row}:${at}"]`)?.focus();

  const goTo = (row: number, at: number) => {
    const nextRow = Math.min(lastRow, Math.max(0, row));
    const nextColumn = Math.min(lastColumn, Math.max(0, at));
    onChoose(nextRow);
    setColumn(nextColumn);
    focusCell(nextRow, nextColumn);
  };

  const startEditing = (row: number, at: number, text?: string) => {
    const fix = fixes[row];
    if (readOnly || !fix) return;
    setEditing({
      row,
      column: at,
      text: text ?? FIX_COLUMNS[at]!.editText(fix, unit),
      fault: null,
      typed: text !== undefined,
    });
  };

  /** True when the typed text was taken, or nothing was being typed. */
  const commit = (): boolean => {
    if (!editing || settled.current === editing) return true;
    const field = FIX_COLUMNS[editing.column]!;
    // Unchanged text keeps the stored digits, whatever unit they are shown in.
    if (editing.text !== field.editText(fixes[editing.row]!, unit)) {
      const parsed = field.parse(editing.text, unit);
      if ('fault' in parsed) {
        setEditing({ ...editing, fault: parsed.fault });
        return false;
      }
      change((draft) => withFix(draft, editing.row, parsed.value));
    }
    settled.current = editing;
    setEditing(null);
    return true;
  };

  const step = (row: number, at: number, by: 1 | -1) => {
    const position = row * (lastColumn + 1) + at + by;
    goTo(Math.floor(position / (lastColumn + 1)), ((position % (lastColumn + 1)) + lastColumn + 1) % (lastColumn + 1));
  };
  const isAtEdge = (row: number, at: number, by: 1 | -1) =>
    by === 1 ? row === lastRow && at === lastColumn : row === 0 && at === 0;

  const keyWhileEditing = (event: KeyboardEvent, row: number, at: number) => {
    if (event.key === 'Escape') {
      event.stopPropagation();
      settled.current = editing;
      setEditing(null);
      focusCell(row, at);
    } else if (event.key === 'Enter' || event.key === 'Tab') {
      const by = event.shiftKey ? -1 : 1;
      const leaves = event.key === 'Tab' && isAtEdge(row, at, by);
      if (!commit()) return event.preventDefault();
      if (leaves) return;
      event.preventDefault();
      if (event.key === 'Enter') goTo(row + by, at);
      else step(row, at, by);
    }
  };

  const keyInCell = (event: KeyboardEvent, row: number, at: number) => {
    const nudge = NUDGES[event.key];
    if (event.altKey && nudge) {
      event.preventDefault();
      if (!readOnly) change((draft) => withFixMoved(draft, row, ...nudge));
      return;
    }
    if ((event.ctrlKey || event.metaKey) && event.key.toLowerCase() === 'd') {
      event.preventDefault();
      const above = fixes[row - 1];
      const { key } = FIX_COLUMNS[at]!;
      if (!readOnly && above && key !== 'time') change((draft) => withFix(draft, row, { [key]: above[key] }));
      return;
    }
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    const moves: Record<string, [number, number]> = {
      ArrowUp: [row - 1, at],
      ArrowDown: [row + 1, at],
      ArrowLeft: [row, at - 1],
      ArrowRight: [row, at + 1],
      Home: [row, 0],
      End: [row, lastColumn],
      PageUp: [row - 10, at],
      PageDown: [row + 10, at],
    };
    const move = moves[event.key];
    if (move) {
      event.preventDefault();
      goTo(...move);
    } else if (event.key === 'F2' || event.key === 'Enter') {
      event.preventDefault();
      startEditing(row, at);
    } else if (event.key === 'Tab') {
      const by = event.shiftKey ? -1 : 1;
      if (isAtEdge(row, at, by)) return;
      event.preventDefault();
      step(row, at, by);
    } else if (event.key === 'Delete' || event.key === 'Backspace') {
      const { key, optional } = FIX_COLUMNS[at]!;
      if (!readOnly && optional) change((draft) => withFix(draft, row, { [key]: null }));
    } else if (/^[\d.+-]$/.test(event.key)) {
      event.preventDefault();
      startEditing(row, at, event.key);
    }
  };

  return (
    <div className="relative min-w-0 overflow-x-auto">
      <table
        ref={grid}
        role="grid"
        aria-label="Fixes of the track"
        aria-rowcount={fixes.length + 1}
        aria-readonly={readOnly}
        className="w-full border-collapse text-14"
      >
        <thead className="sticky top-0 z-2 bg-sheet">
          <tr>
            {FIX_COLUMNS.map((field, index) => (
              <th key={field.key} scope="col" className={headLook(index === 0)}>
                {field.label(unit)}
              </th>
            ))}
            <th scope="col" className={headLook(false)}>
              Heading
            </th>
            <th scope="col" className={headLook(false)}>
              Speed, {label}
            </th>
          </tr>
        </thead>
        <tbody>
          {fixes.map((fix, row) => (
            <tr
              key={row}
              aria-selected={row === chosen}
              className={classNames(
                'h-(--row-dense) border-b border-rule last:border-b-0',
                row === chosen && 'bg-selected shadow-[inset_3px_0_var(--action)]',
              )}
            >
              {FIX_COLUMNS.map((field, at) => {
                const isEdited = editing?.row === row && editing.column === at;
                return (
                  <td
                    key={field.key}
                    role="gridcell"
                    data-cell={`${row}:${at}`}
                    tabIndex={row === chosen && at === column && !isEdited ? 0 : -1}
                    onFocus={() => {
                      if (row !== chosen) onChoose(row);
                      setColumn(at);
                    }}
                    onDoubleClick={() => startEditing(row, at)}
                    onKeyDown={(event) => (isEdited ? keyWhileEditing(event, row, at) : keyInCell(event, row, at))}
                    className={classNames(
                      'px-2 whitespace-nowrap -outline-offset-2',
                      at === 0 ? 'sticky left-0 z-1 bg-inherit pl-4 text-left' : 'text-right',
                      row !== chosen && at === 0 && 'bg-sheet',
                    )}
                  >
                    {isEdited ? (
                      <CellInput
                        label={`${field.label(unit)}, fix ${row + 1}`}
                        text={editing.text}
                        wide={at === 0}
                        selected={!editing.typed}
                        faultId={editing.fault ? faultId : undefined}
                        onText={(text) => setEditing({ ...editing, text, fault: null })}
                        onLeave={commit}
                      />
                    ) : (
                      <CellText field={field} fix={fix} resolved={resolved[row]} />
                    )}
                  </td>
                );
              })}
              <td role="gridcell" className="px-2 text-right text-ink-2">
                {resolved[row] && `${decimal(resolved[row].headingDeg, 0)}°`}
              </td>
              <td role="gridcell" className="px-2 pr-4 text-right text-ink-2">
                <Speed fix={resolved[row]} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      {editing?.fault && (
        <p id={faultId} role="alert" className="sticky left-0 bg-error-tint px-4 py-1.5 text-13 text-error">
          {editing.fault}
        </p>
      )}
    </div>
  );
}

const headLook = (isFirst: boolean) =>
  classNames(
    'border-b border-rule-strong px-2 py-1.5 text-12 font-normal whitespace-nowrap text-ink-2 last:pr-4',
    isFirst ? 'sticky left-0 bg-sheet pl-4 text-left' : 'text-right',
  );

function Speed({ fix }: { fix: ResolvedFix | undefined }) {
  const { gust } = useUnits();
  return fix ? gust(fix.speedMs) : null;
}

/** What was entered, or what was filled: in brass, with the word. */
function CellText({ field, fix, resolved }: { field: FixColumn; fix: DraftFix; resolved: ResolvedFix | undefined }) {
  const { unit } = useUnits();
  const entered = field.text(fix, unit);
  if (entered !== null)
    return (
      <>
        {entered}
        {field.key === 'time' && resolved?.overLand && (
          <span className="ml-2 rounded-1 bg-idle-tint px-1.5 py-0.5 text-12 text-idle">land</span>
        )}
      </>
    );
  if (!field.optional) return <span className="text-caution">needed</span>;
  const relation = resolved?.filled[field.key];
  if (resolved && field.filled)
    return (
      <span className="text-caution" title={relation && `Filled: ${relation}`}>
        {field.filled(resolved, unit)} <span className="text-12">filled</span>
      </span>
    );
  return <span className="text-12 text-ink-2">to fill</span>;
}

interface CellInputProps {
  label: string;
  text: string;
  wide: boolean;
  selected: boolean;
  faultId: string | undefined;
  onText: (text: string) => void;
  onLeave: () => void;
}

function CellInput({ label, text, wide, selected, faultId, onText, onLeave }: CellInputProps) {
  const input = useRef<HTMLInputElement>(null);
  useEffect(() => {
    input.current?.focus();
    if (selected) input.current?.select();
  }, [selected]);
  return (
    <input
      ref={input}
      aria-label={label}
      aria-invalid={faultId !== undefined}
      aria-describedby={faultId}
      inputMode={wide ? 'text' : 'decimal'}
      value={text}
      placeholder={wide ? '2026-09-03 06:00' : undefined}
      onChange={(event) => onText(event.target.value)}
      onBlur={onLeave}
      className={classNames(
        'h-6.5 rounded-1 border border-edge bg-sheet px-1.5 text-14 aria-invalid:border-2 aria-invalid:border-error',
        wide ? 'w-36' : 'w-17 text-right',
      )}
    />
  );
}
