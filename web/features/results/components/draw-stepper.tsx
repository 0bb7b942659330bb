import { useEffect, useEffectEvent } from 'react';
import { ChevronLeft, ChevronRight } from 'lucide-react';
import type { Draws } from '#contract/draws.ts';
import { drawBeside } from '../map-view.ts';

interface DrawStepperProps {
  draws: Draws;
  draw: number;
  onDraw: (draw: number) => void;
}

const STRIP =
  'flex h-7.5 flex-none items-stretch overflow-hidden rounded-2 border border-rule-strong bg-sheet text-13 shadow-2 pointer-coarse:h-11';
const STEP =
  'grid w-9 place-items-center hover:bg-hover aria-disabled:cursor-not-allowed aria-disabled:text-ink-2 aria-disabled:opacity-50 pointer-coarse:w-11';
const JUMP =
  'border-l border-rule px-2 text-12 font-bold whitespace-nowrap text-link first:border-l-0 hover:bg-hover aria-pressed:bg-selected aria-pressed:text-ink pointer-coarse:min-w-11';
const NAMED = [
  ['p5', '5 %'],
  ['p50', '50 %'],
  ['p95', '95 %'],
] as const;

/** Steps through the draws in the order of event loss; [ and ] do the same from the keyboard. */
export function DrawStepper({ draws: { draws, named }, draw, onDraw }: DrawStepperProps) {
  const rank = draws.find((one) => one.draw === draw)?.rank ?? 0;
  const before = drawBeside(draws, draw, -1);
  const after = drawBeside(draws, draw, 1);
  const stepBy = useEffectEvent((to: 'before' | 'after') => {
    const next = to === 'before' ? before : after;
    if (next !== null) onDraw(next);
  });
  useEffect(() => {
    const press = (event: KeyboardEvent) => {
      if (event.ctrlKey || event.metaKey || event.altKey) return;
      if (event.target instanceof HTMLElement && event.target.closest('input, select, textarea, [role=dialog]')) return;
      if (event.key === '[') stepBy('before');
      if (event.key === ']') stepBy('after');
    };
    document.addEventListener('keydown', press);
    return () => document.removeEventListener('keydown', press);
  }, []);
  return (
    <div role="group" aria-label="Draws in the order of event loss" className="flex flex-wrap gap-2">
      <div className={STRIP}>
        <button
          type="button"
          className={STEP}
          aria-label="Draw with the next smaller loss ([)"
          title="Draw with the next smaller loss ([)"
          aria-disabled={before === null}
          onClick={() => before !== null && onDraw(before)}
        >
          <ChevronLeft size={16} aria-hidden />
        </button>
        <p
          role="status"
          className="flex min-w-30 items-center justify-center border-x border-rule px-2.5 whitespace-nowrap"
        >
          Rank&nbsp;<b>{rank}</b>&nbsp;of {draws.length}
        </p>
        <button
          type="button"
          className={STEP}
          aria-label="Draw with the next larger loss (])"
          title="Draw with the next larger loss (])"
          aria-disabled={after === null}
          onClick={() => after !== null && onDraw(after)}
        >
          <ChevronRight size={16} aria-hidden />
        </button>
      </div>
      {named && (
        <div className={STRIP}>
          {NAMED.map(([name, label]) => (
            <button
              key={name}
              type="button"
              className={JUMP}
              aria-pressed={named[name] === draw}
              aria-label={`Draw at ${label} of the event’s loss`}
              title={`Draw at ${label} of the event’s loss`}
              onClick={() => onDraw(named[name])}
            >
              {label}
            </button>
          ))}
        </div>
      )}
    </div>
  );
}
