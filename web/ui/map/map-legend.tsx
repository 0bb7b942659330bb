import { useState } from 'react';
import { ChevronDown, ChevronUp } from 'lucide-react';
import { classNames } from '../../lib/class-names.ts';
import { decimal } from '../../lib/numbers.ts';
import { useNarrow } from '../../lib/use-narrow.ts';
import { useUnits } from '../../lib/units.tsx';
import { percentOf } from '../charts/axis.ts';
import {
  CHANCE_EDGES,
  CHANCE_TOKENS,
  differenceToken,
  GUST_EDGES_MS,
  GUST_TICKS_MS,
  GUST_TOKENS,
} from '../charts/gust-scale.ts';
import type { MapView } from './map-data.ts';

const TITLES: Record<MapView, string> = {
  plain: 'Peak 3-second gust, plain',
  p50: 'Peak 3-second gust, enhanced median',
  p90: 'Peak 3-second gust, enhanced 90 %',
  p99: 'Peak 3-second gust, enhanced 99 %',
  difference: 'Enhanced median less plain',
  draw: 'Peak 3-second gust, one draw',
  chance: 'Chance',
};

interface MapLegendProps {
  view: MapView;
  /** Lower edges of the difference steps. */
  levels: readonly number[];
  /** Whether the picture rests on vortex draws. */
  uncertain: boolean;
  run?: string | undefined;
  /** The gust whose chance is shown [m/s]. */
  chanceMs?: number | undefined;
}

/** Steps in the map's very colours, ticks in the person's unit; folds to its bar on a phone. */
export function MapLegend({ view, levels, uncertain, run, chanceMs }: MapLegendProps) {
  const { gust, label } = useUnits();
  const title =
    view === 'chance' && chanceMs !== undefined
      ? `Chance of ${gust(chanceMs)} ${label} or more, %`
      : `${TITLES[view]}, ${label}`;
  const narrow = useNarrow();
  const [open, setOpen] = useState(!narrow);
  const Fold = open ? ChevronDown : ChevronUp;
  return (
    <section
      aria-label="Legend"
      className="w-72 max-w-full rounded-2 border border-rule bg-sheet px-3 pt-2 pb-1.5 text-12 shadow-2"
    >
      <h3 className="flex items-baseline gap-2 text-12 font-bold tracking-normal">
        <span>{title}</span>
        <button
          type="button"
          aria-expanded={open}
          aria-label={open ? 'Fold the legend' : 'Unfold the legend'}
          className="-my-1 ml-auto grid size-6 flex-none place-items-center rounded-1 text-ink-2 hover:bg-hover"
          onClick={() => setOpen(!open)}
        >
          <Fold size={14} aria-hidden />
        </button>
      </h3>
      {view === 'difference' ? (
        <DifferenceSteps levels={levels} />
      ) : view === 'chance' ? (
        <ChanceSteps />
      ) : (
        <GustSteps />
      )}
      {open && (
        <p className="mt-1 leading-snug text-ink-2">
          10 m height, terrain as found.
          {view === 'draw'
            ? ' One draw of 264; others differ.'
            : view === 'chance'
              ? ' Share of 264 draws of this one track, by weight; not the chance of the storm.'
              : uncertain && ' One effect’s spread over 264 draws; real storms differ.'}
          {run && <span className="hidden print:inline"> Run {run}.</span>}
        </p>
      )}
    </section>
  );
}

export function GustSteps() {
  const { toUnit } = useUnits();
  const steps = GUST_EDGES_MS.length;
  return (
    <>
      <div className="mt-1.5 flex h-3 border border-edge">
        {GUST_TOKENS.map((token) => (
          <span key={token} className="flex-1" style={{ background: `var(${token})` }} />
        ))}
      </div>
      <div className="relative h-4.5">
        {GUST_TICKS_MS.map((tick) => (
          <span
            key={tick}
            className="absolute top-0.5 -translate-x-1/2 before:absolute before:-top-2 before:left-1/2 before:h-1.5 before:border-l before:border-ink"
            style={{ left: percentOf((tick - GUST_EDGES_MS[0]) / (5 * steps)) }}
          >
            {decimal(toUnit(tick), 0)}
          </span>
        ))}
        <span className="absolute top-0.5 right-0">{decimal(toUnit(85), 0)}+</span>
      </div>
    </>
  );
}

function ChanceSteps() {
  return (
    <>
      <div className="mt-1.5 flex h-3 border border-edge">
        {CHANCE_TOKENS.map((token) => (
          <span key={token} className="flex-1" style={{ background: `var(${token})` }} />
        ))}
      </div>
      <div className="flex h-4.5">
        {CHANCE_EDGES.map((edge) => (
          <span key={edge} className="flex-1 pt-0.5">
            {edge}
          </span>
        ))}
      </div>
    </>
  );
}

function DifferenceSteps({ levels }: { levels: readonly number[] }) {
  const { toUnit } = useUnits();
  if (levels.length === 0) return null;
  return (
    <>
      <div className="mt-1.5 flex h-3 border border-edge">
        {levels.map((level) => (
          <span key={level} className="flex-1" style={{ background: `var(${differenceToken(level, levels)})` }} />
        ))}
      </div>
      <div className="relative h-4.5">
        {levels.map((level, index) =>
          index === 0 || (levels.length > 7 && index % 2 === 0) ? null : (
            <span
              key={level}
              className="absolute top-0.5 -translate-x-1/2 before:absolute before:-top-2 before:left-1/2 before:h-1.5 before:border-l before:border-ink"
              style={{ left: percentOf(index / levels.length) }}
            >
              {level > 0 ? '+' : ''}
              {decimal(toUnit(level), 1)}
            </span>
          ),
        )}
      </div>
    </>
  );
}

/** What the shapes mean; drawn by the same geometry as the map's marks. */
export function SiteShapes({ held, className }: { held: boolean; className?: string }) {
  const mark = 'inline-block size-2.5 border-[1.5px] border-(--p-ink) dark:border-(--ink)';
  return (
    <ul
      className={classNames(
        'flex flex-wrap gap-x-3.5 rounded-2 border border-rule bg-sheet px-3 py-1.5 text-12 shadow-2',
        className,
      )}
    >
      <li className="flex items-center gap-1.5">
        <span className={`${mark} rounded-pill bg-(--p-porcelain)`} /> Ready
      </li>
      <li className="flex items-center gap-1.5">
        <span className={`${mark} rotate-45 bg-(--p-porcelain)`} /> With notes
      </li>
      {held && (
        <li className="flex items-center gap-1.5">
          <span className={`${mark} bg-(--p-pale-brass)`} /> Held
        </li>
      )}
    </ul>
  );
}
