import type { PointerEvent } from 'react';
import { classNames } from '../../lib/class-names.ts';
import { decimal } from '../../lib/numbers.ts';
import { useUnits } from '../../lib/units.tsx';
import { percentOf, type Axis } from './axis.ts';
import { ChartFrame } from './chart-frame.tsx';

export interface Profile {
  radiusM: readonly number[];
  gradientMs: readonly number[];
  meanMs: readonly number[];
  rightMs: readonly number[];
  leftMs: readonly number[];
}

type Line = Exclude<keyof Profile, 'radiusM'>;
export const PROFILE_LINES: readonly { line: Line; name: string; stroke: string; dash?: string; width: number }[] = [
  { line: 'gradientMs', name: 'gradient', stroke: 'var(--thread)', dash: '5 4', width: 1.5 },
  { line: 'meanMs', name: 'mean round the circle', stroke: 'var(--ink)', width: 2 },
  { line: 'rightMs', name: 'right of the motion', stroke: 'var(--ribbon)', width: 2 },
  { line: 'leftMs', name: 'left of the motion', stroke: 'var(--verdigris)', dash: '2 3', width: 2 },
];

/** Wind of one line at any radius: straight between the points given. */
export const profileAt = (profile: Profile, line: Line, radiusM: number): number => {
  const { radiusM: radii } = profile;
  const after = radii.findIndex((radius) => radius >= radiusM);
  const values = profile[line];
  if (after === -1) return values.at(-1) ?? 0;
  if (after === 0) return values[0] ?? 0;
  const share = (radiusM - radii[after - 1]!) / (radii[after]! - radii[after - 1]!);
  return values[after - 1]! + share * (values[after]! - values[after - 1]!);
};

interface RadialProfileProps {
  title: string;
  profile: Profile;
  radiusOfMaxWindM: number;
  /** In kilometres and in the person’s unit; shared by charts that are compared. */
  axes: { radius: Axis; wind: Axis };
  /** Where the numbers are read out. */
  readM: number;
  onRead: (radiusM: number) => void;
  fileName: string;
}

const WIDTH = 1000;
const HEIGHT = 100;

/** Wind over open sea by distance from the centre: gradient, mean, right and left of the motion. */
export function RadialProfile(props: RadialProfileProps) {
  const { title, profile, radiusOfMaxWindM, axes, readM, onRead, fileName } = props;
  const { gust, label, toUnit } = useUnits();
  const { radius, wind } = axes;
  const strongest = Math.max(...profile.rightMs, ...profile.leftMs);
  const path = (line: Line) =>
    `M${profile.radiusM
      .map((metres, index) => ({ km: metres / 1000, speed: toUnit(profile[line][index]!) }))
      .filter(({ km }) => km <= radius.high)
      .map(({ km, speed }) => `${round(radius.at(km) * WIDTH)} ${round((1 - wind.at(speed)) * HEIGHT)}`)
      .join('L')}`;
  const follow = (event: PointerEvent) => {
    const box = event.currentTarget.getBoundingClientRect();
    if (box.width > 0)
      onRead(1000 * (radius.low + ((event.clientX - box.left) / box.width) * (radius.high - radius.low)));
  };
  const readAt = radius.at(readM / 1000);
  return (
    <ChartFrame
      title={title}
      aside={`10-min wind over open sea, ${label}`}
      summary={`Wind by distance from the centre, ${label}: strongest ${gust(strongest)} near ${decimal(radiusOfMaxWindM / 1000, 1)} km; at ${decimal(readM / 1000, 0)} km ${PROFILE_LINES.map(
        ({ line, name }) => `${name} ${gust(profileAt(profile, line, readM))}`,
      ).join(', ')}.`}
      fileName={fileName}
      table={{
        columns: ['Radius, km', ...PROFILE_LINES.map(({ name }) => `${name}, ${label}`)],
        rows: profile.radiusM.map((metres, index) => [
          decimal(metres / 1000, 1),
          ...PROFILE_LINES.map(({ line }) => gust(profile[line][index]!)),
        ]),
      }}
    >
      <ul className="mt-1 flex flex-wrap gap-x-3.5 gap-y-0.5 text-12 text-ink-2" aria-hidden>
        {PROFILE_LINES.map(({ line, name, stroke, dash, width }) => (
          <li key={line} className="flex items-center gap-1.5">
            <svg width={18} height={4}>
              <path d="M0 2H18" stroke={stroke} strokeWidth={width} strokeDasharray={dash} />
            </svg>
            {name}
          </li>
        ))}
      </ul>
      <div className="mt-2 grid grid-cols-[2rem_1fr] text-12 text-ink-2" aria-hidden>
        <div className="relative h-44">
          {wind.ticks.map((tick) => (
            <span key={tick} className="absolute right-2 translate-y-1/2" style={{ bottom: percentOf(wind.at(tick)) }}>
              {decimal(tick, 0)}
            </span>
          ))}
        </div>
        <div className="relative h-44 cursor-crosshair touch-pan-y" onPointerMove={follow} onPointerDown={follow}>
          {wind.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute inset-x-0 border-t border-chart-grid"
              style={{ bottom: percentOf(wind.at(tick)) }}
            />
          ))}
          <span
            className="absolute inset-y-0 border-l border-dashed border-rule-strong"
            style={{ left: percentOf(radius.at(radiusOfMaxWindM / 1000)) }}
          />
          <svg
            className="absolute inset-0 size-full overflow-visible"
            viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
            preserveAspectRatio="none"
          >
            {PROFILE_LINES.map(({ line, stroke, dash, width }) => (
              <path
                key={line}
                d={path(line)}
                fill="none"
                stroke={stroke}
                strokeWidth={width}
                strokeDasharray={dash}
                strokeLinejoin="round"
                vectorEffect="non-scaling-stroke"
              />
            ))}
          </svg>
          <span className="absolute inset-y-0 border-l-[1.5px] border-ceiling" style={{ left: percentOf(readAt) }} />
          {PROFILE_LINES.map(({ line }) => (
            <span
              key={line}
              className={classNames(
                'absolute size-2 -translate-1/2 rounded-pill border-[1.5px] border-ceiling bg-sheet',
              )}
              style={{
                left: percentOf(readAt),
                top: percentOf(1 - wind.at(toUnit(profileAt(profile, line, readM)))),
              }}
            />
          ))}
        </div>
        <div className="relative col-start-2 h-5">
          {radius.ticks.map((tick) => (
            <span
              key={tick}
              className="absolute top-1 -translate-x-1/2 whitespace-nowrap"
              style={{ left: percentOf(radius.at(tick)) }}
            >
              {decimal(tick, 0)}
            </span>
          ))}
        </div>
        <span className="col-start-2 text-right">km from the centre; dashed: radius of maximum wind</span>
      </div>
    </ChartFrame>
  );
}

const round = (value: number) => Math.round(value * 10) / 10;
