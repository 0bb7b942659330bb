import { useState } from 'react';
import type { ComparedObservation, ObservationRole, SourceClass, Validation } from '#contract/validation.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis, percentOf } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { residualOf, ROLE_WORDS, signedShare, SOURCE_WORDS } from '../validation-words.ts';

const SHAPES: Record<SourceClass, string> = {
  A: 'M6 1.5A4.5 4.5 0 1 1 6 10.5A4.5 4.5 0 1 1 6 1.5Z',
  B: 'M2 2H10V10H2Z',
  C: 'M6 1L11 10.5H1Z',
  M: 'M6 .5L11.5 6L6 11.5L.5 6Z',
};
/** Roles with a gust to compare, and how their marks are drawn; solid is what is scored. */
const DRAWN: Partial<Record<ObservationRole, { filled: boolean; dash?: string; stroke: string }>> = {
  P: { filled: true, stroke: 'var(--ribbon)' },
  Q: { filled: false, stroke: 'var(--ink-2)' },
  T: { filled: false, dash: '2 1.5', stroke: 'var(--ink-2)' },
  L: { filled: false, stroke: 'var(--ceiling)' },
};
const NEAR = 0.1;

function Mark({ source, role }: { source: SourceClass; role: ObservationRole }) {
  const { filled, dash, stroke } = DRAWN[role] ?? DRAWN.Q!;
  return (
    <svg width={role === 'L' ? 20 : 12} height={12} className="block overflow-visible" aria-hidden>
      <path
        d={SHAPES[source]}
        fill={filled ? stroke : 'var(--sheet)'}
        stroke={filled ? 'var(--sheet)' : stroke}
        strokeWidth={filled ? 0.75 : 1.5}
        strokeDasharray={dash}
      />
      {role === 'L' && <path d="M11 6H19M16 3.5L19 6L16 8.5" fill="none" stroke={stroke} strokeWidth={1.5} />}
    </svg>
  );
}

/** Modelled gust up, observed gust across; shape says the source, fill says what the observation is good for. */
export function GustScatter({ validation }: { validation: Validation }) {
  const { gust, label, toUnit } = useUnits();
  const [settings, setSettings] = useState<'default' | 'wind'>('default');
  const [layer, setLayer] = useState<'plain' | 'enhanced'>('plain');
  const [shown, setShown] = useState<'scored' | 'all'>('scored');
  const modelledMs = (one: ComparedObservation) =>
    layer === 'plain' ? one.modelled[settings].plainMs : one.modelled[settings].p50Ms;
  const points = validation.observations.filter(
    ({ role, standardisedMs }) => standardisedMs !== null && (shown === 'all' ? DRAWN[role] : role === 'P'),
  );
  // The axes stay when another setting is looked at.
  const reach = points.flatMap(({ standardisedMs, modelled: { default: byPressure, wind } }) => [
    ...[standardisedMs!, byPressure.plainMs, byPressure.p50Ms, wind.plainMs, wind.p50Ms],
  ]);
  const axis = linearAxis(toUnit(Math.min(...reach)), toUnit(Math.max(...reach)), 6);
  const near = points.filter((one) => Math.abs(residualOf(one, modelledMs(one)) ?? 1) <= NEAR).length;
  const way = `${settings === 'default' ? 'pressure' : 'wind'}, ${layer === 'plain' ? 'plain' : 'enhanced, median of the draws'}`;
  return (
    <>
      <div className="mb-2.5 flex flex-wrap gap-2" data-print="hide">
        <Segmented
          label="Intensity from"
          value={settings}
          onChange={setSettings}
          options={[
            { value: 'default', label: 'Pressure' },
            { value: 'wind', label: 'Wind' },
          ]}
        />
        <Segmented
          label="Vortices"
          value={layer}
          onChange={setLayer}
          options={[
            { value: 'plain', label: 'Plain' },
            { value: 'enhanced', label: 'Enhanced' },
          ]}
        />
        <Segmented
          label="Observations shown"
          value={shown}
          onChange={setShown}
          options={[
            { value: 'scored', label: 'Scored' },
            { value: 'all', label: 'All compared' },
          ]}
        />
      </div>
      <ChartFrame
        title="Modelled against observed"
        aside={`3-s gust at 10 m, ${label}`}
        summary={`Modelled gust against observed gust by ${way}: ${near} of ${points.length} within 10 %.`}
        fileName="modelled-against-observed"
        table={{
          columns: ['Place', 'Storm', 'Role', 'Source', `Observed, ${label}`, `Modelled, ${label}`, 'Residual'],
          rows: points.map((one) => [
            one.station,
            one.storm,
            ROLE_WORDS[one.role].name,
            SOURCE_WORDS[one.sourceClass],
            gust(one.standardisedMs!),
            gust(modelledMs(one)),
            signedShare(residualOf(one, modelledMs(one))!),
          ]),
        }}
      >
        <div className="mx-auto mt-2 grid max-w-140 grid-cols-[2rem_1fr] text-12 text-ink-2" aria-hidden>
          <div className="relative">
            {axis.ticks.map((tick) => (
              <span
                key={tick}
                className="absolute right-2 translate-y-1/2"
                style={{ bottom: percentOf(axis.at(tick)) }}
              >
                {decimal(tick, 0)}
              </span>
            ))}
          </div>
          <div className="relative aspect-square">
            {axis.ticks.map((tick) => (
              <span
                key={tick}
                className="absolute inset-x-0 border-t border-chart-grid"
                style={{ bottom: percentOf(axis.at(tick)) }}
              />
            ))}
            <Diagonals low={axis.low} high={axis.high} />
            {points.map((one) => (
              <span
                key={one.id}
                className="absolute h-3 w-3 -translate-x-1/2 translate-y-1/2"
                style={{
                  left: percentOf(axis.at(toUnit(one.standardisedMs!))),
                  bottom: percentOf(axis.at(toUnit(modelledMs(one)))),
                }}
              >
                <Mark source={one.sourceClass} role={one.role} />
              </span>
            ))}
            <span className="absolute top-1 left-2">modelled, {label}</span>
          </div>
          <div className="relative col-start-2 h-5">
            {axis.ticks.map((tick) => (
              <span
                key={tick}
                className="absolute top-1 -translate-x-1/2 whitespace-nowrap"
                style={{ left: percentOf(axis.at(tick)) }}
              >
                {decimal(tick, 0)}
              </span>
            ))}
          </div>
          <span className="col-start-2 text-right">observed, {label}; line: equal, dashed: ± 10 %</span>
        </div>
        <ul className="mt-2 flex flex-wrap gap-x-4 gap-y-1 text-12 text-ink-2" aria-hidden>
          {(['A', 'B', 'C', 'M'] as const).map((source) => (
            <li key={source} className="flex items-center gap-1.5">
              <Mark source={source} role="P" />
              {SOURCE_WORDS[source]}
            </li>
          ))}
          {shown === 'all' &&
            (['Q', 'T', 'L'] as const).map((role) => (
              <li key={role} className="flex items-center gap-1.5">
                <Mark source="A" role={role} />
                {ROLE_WORDS[role].name}
              </li>
            ))}
        </ul>
      </ChartFrame>
    </>
  );
}

/** Where modelled equals observed, and 10 % to either side. */
function Diagonals({ low, high }: { low: number; high: number }) {
  const span = high - low;
  const at = (factor: number) => {
    const ends = [low, high].map((x) => ({ x: (100 * (x - low)) / span, y: 100 - (100 * (factor * x - low)) / span }));
    return `M${ends.map(({ x, y }) => `${x.toFixed(2)} ${y.toFixed(2)}`).join('L')}`;
  };
  return (
    <svg className="absolute inset-0 size-full" viewBox="0 0 100 100" preserveAspectRatio="none">
      {[1 - NEAR, 1, 1 + NEAR].map((factor) => (
        <path
          key={factor}
          d={at(factor)}
          fill="none"
          stroke="var(--thread)"
          strokeWidth={factor === 1 ? 1.5 : 1}
          strokeDasharray={factor === 1 ? undefined : '4 4'}
          vectorEffect="non-scaling-stroke"
        />
      ))}
    </svg>
  );
}
