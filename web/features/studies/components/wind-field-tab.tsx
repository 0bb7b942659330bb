import { useEffect, useId, useMemo, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import type { ChainSettings, WindFieldReply } from '#contract/studies.ts';
import { failureOf } from '../../../api/failure.ts';
import { classNames } from '../../../lib/class-names.ts';
import { clock, shortDay, utc } from '../../../lib/dates.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useDelayed } from '../../../lib/use-delayed.ts';
import { useNarrow } from '../../../lib/use-narrow.ts';
import { useSettled } from '../../../lib/use-settled.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis } from '../../../ui/charts/axis.ts';
import { strongestPlace, type FieldPlace } from '../../../ui/charts/field-grid.ts';
import { FieldPicture } from '../../../ui/charts/field-picture.tsx';
import { profileAt, PROFILE_LINES, RadialProfile } from '../../../ui/charts/radial-profile.tsx';
import { timeTicks } from '../../../ui/charts/time-axis.ts';
import { GustSteps } from '../../../ui/map/map-legend.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { Slider } from '../../../ui/slider.tsx';
import { DEFAULT_SETTINGS, departuresOf, settingText } from '../chain-settings.ts';
import { windFieldQuery } from '../study-queries.ts';
import { stopNear, trackTimes } from '../track-times.ts';
import { CHOICES_ID, ChoicesPanel } from './choices-panel.tsx';
import { CursorNumbers, StormNumbers } from './field-numbers.tsx';

interface WindFieldTabProps {
  version: ScenarioVersion;
  /** As an instant, from the address; the strongest fix when left out. */
  time: string | null;
  onTime: (time: string) => void;
  /** What is compared with the defaults. */
  settings: ChainSettings;
  onSettings: (settings: ChainSettings) => void;
}

const SETTLE_MS = 150;
const HALF_WIDTHS = [
  { value: '100000', label: '100 km' },
  { value: '200000', label: '200 km' },
  { value: '400000', label: '400 km' },
] as const;
type HalfWidth = (typeof HALF_WIDTHS)[number]['value'];

/** The wind at any time of the track, drawn with the defaults and, beside it, with what is chosen. */
export function WindFieldTab({ version, time, onTime, settings, onSettings }: WindFieldTabProps) {
  const { fixes, maxima } = version.resolution;
  const { stops, fixes: fixTimes } = useMemo(() => trackTimes(fixes.map((fix) => fix.time)), [fixes]);
  const strongest = Date.parse(fixes[maxima.fix]?.time ?? fixes[0]!.time);
  const [moved, setMoved] = useState<number | null>(null);
  const timeMs = moved ?? stopNear(stops, time, strongest);
  const [halfWidth, setHalfWidth] = useState<HalfWidth>('200000');
  const narrow = useNarrow();
  const settled = useSettled(timeMs, SETTLE_MS);
  const asked = {
    scenarioId: version.scenarioId,
    version: version.number,
    time: new Date(settled).toISOString(),
    halfWidthM: Number(halfWidth),
  };
  const departures = departuresOf(settings);
  const compares = departures.length > 0;
  const a = useQuery(windFieldQuery({ ...asked, settings: DEFAULT_SETTINGS }));
  const b = useQuery(windFieldQuery({ ...asked, settings }, compares));
  const failed = a.isError ? a : compares && b.isError ? b : null;
  const waits = useDelayed(a.isPending || (compares && b.isPending));
  const moment = (at: number) => `${shortDay(new Date(at))} ${clock(new Date(at))} UTC`;

  const movedTo = moved === null ? null : asked.time;
  useEffect(() => {
    if (movedTo !== null && movedTo !== time) onTime(movedTo);
  }, [movedTo, time, onTime]);

  const fixNumber = fixTimes.indexOf(timeMs) + 1;
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_19.5rem] items-start gap-3.5 max-xl:grid-cols-1">
      <div className="flex min-w-0 flex-col gap-3.5">
        <section
          aria-label="Time along the track"
          className="rounded-3 border border-rule bg-sheet px-4 pt-2.5 pb-1.5 shadow-1"
        >
          <div className="mb-1 flex flex-wrap items-center gap-x-4 gap-y-1.5">
            <div className="min-w-0 flex-1 basis-64">
              <b className="block text-20 font-black tracking-tight">{utc(new Date(timeMs))}</b>
              <span className="text-12 text-ink-2">
                {fixNumber > 0 ? `fix ${fixNumber} of ${fixTimes.length}` : 'between two fixes'}; Page Up and Down go
                from fix to fix
              </span>
            </div>
            <Segmented label="To each side" value={halfWidth} options={HALF_WIDTHS} onChange={setHalfWidth} />
            <a href={`#${CHOICES_ID}`} className="text-13 font-bold xl:hidden">
              Change the settings
            </a>
          </div>
          <Slider
            label="Time along the track"
            stops={stops}
            marks={fixTimes}
            value={timeMs}
            valueText={moment}
            onChange={setMoved}
            ticks={timeTicks(stops[0]!, stops.at(-1)!, narrow ? 3 : 9).map((tick) => ({
              at: tick.timeMs,
              label: tick.label,
            }))}
          />
        </section>
        {failed && (
          <ProblemNotice
            title="The wind field wasn’t worked out"
            {...failureOf(failed.error!)}
            onRetry={() => failed.refetch()}
          />
        )}
        {a.data && (!compares || b.data) ? (
          <Fields
            a={a.data}
            b={compares ? b.data! : null}
            difference={departures.map(settingText).join('; ')}
            isOld={a.isPlaceholderData || (compares && b.isPlaceholderData) || settled !== timeMs}
            fileName={`${version.name}-v${version.number}`}
          />
        ) : (
          !failed && waits && <FieldSkeleton pictures={compares ? 2 : 1} />
        )}
      </div>
      <ChoicesPanel settings={settings} onSettings={onSettings} />
    </div>
  );
}

interface FieldsProps {
  a: WindFieldReply;
  b: WindFieldReply | null;
  /** How B departs from the defaults, in words. */
  difference: string;
  isOld: boolean;
  fileName: string;
}

function Fields({ a, b, difference, isOld, fileName }: FieldsProps) {
  const { gust, label, toUnit } = useUnits();
  const readoutId = useId();
  const [chosen, setCursor] = useState<FieldPlace | null>(null);
  const [readM, setReadM] = useState<number | null>(null);
  const cursor = chosen ?? strongestPlace(a.field);
  const shown = [a, ...(b ? [b] : [])];
  const reach = Math.min(a.field.halfWidthM, a.profile.radiusM.at(-1) ?? a.field.halfWidthM);
  const most = Math.max(...shown.flatMap(({ profile }) => PROFILE_LINES.flatMap(({ line }) => profile[line])));
  const axes = { radius: linearAxis(0, reach / 1000, 5), wind: linearAxis(0, toUnit(most), 5) };
  const held = Math.min(reach, Math.max(0, readM ?? a.state.radiusOfMaxWindM));
  const radii = a.profile.radiusM.filter((radius) => radius <= reach);
  const name = (reply: WindFieldReply) => (b === null ? 'Every default' : reply === a ? 'A, every default' : 'B');
  const readout = PROFILE_LINES.map(({ line, name: what }) => {
    const [first, second] = [profileAt(a.profile, line, held), b ? profileAt(b.profile, line, held) : null];
    return `${what} ${gust(first)}${second === null ? '' : ` against ${gust(second)}`}`;
  }).join(', ');
  return (
    <div aria-busy={isOld} className="flex flex-col gap-3.5">
      <div
        className={classNames(
          'grid grid-cols-2 gap-3.5 max-md:grid-cols-1',
          b === null && 'items-start',
          isOld && 'opacity-75',
        )}
      >
        {shown.map((reply) => (
          <section
            key={name(reply)}
            aria-label={`Wind field, ${name(reply)}`}
            className="flex flex-col overflow-hidden rounded-3 border border-rule bg-sheet shadow-1"
          >
            <header className="flex min-h-13.5 flex-wrap content-center items-baseline gap-x-2.5 px-4 py-2">
              <h2 className="text-15">{name(reply)}</h2>
              <span className="min-w-0 text-12 text-ink-2">
                {reply === b ? difference : `3-s gust over open sea, 10 m, ${label}`}
              </span>
            </header>
            <FieldPicture
              label={`Gust around the centre, ${name(reply)}`}
              grid={reply.field}
              marks={reply.state}
              cursor={cursor}
              onCursor={setCursor}
              describedBy={readoutId}
              className="mt-auto"
            />
          </section>
        ))}
        {b === null && (
          <div className="flex min-w-0 flex-col gap-3.5">
            <CursorNumbers a={a} b={b} cursor={cursor} id={readoutId} />
            <StormNumbers a={a} b={b} />
          </div>
        )}
      </div>
      <section aria-label="Legend" className="rounded-3 border border-rule bg-sheet px-4 py-2.5 text-12 shadow-1">
        <div className="grid grid-cols-[minmax(0,22rem)_minmax(0,1fr)] items-center gap-x-6 gap-y-1.5 max-md:grid-cols-1">
          <div>
            <b>Gust, {label}</b>
            <GustSteps />
          </div>
          <p className="text-ink-2">
            North is up. Arrows fly with the wind; the arrow from the centre is the storm’s own motion, the dashed ring
            its radius of maximum wind. Open sea everywhere: land and ground come in with the sites. No vortices.
          </p>
        </div>
      </section>
      {b && (
        <div className="grid grid-cols-2 gap-3.5 max-wide:grid-cols-1">
          <CursorNumbers a={a} b={b} cursor={cursor} id={readoutId} />
          <StormNumbers a={a} b={b} />
        </div>
      )}
      <section aria-label="Radial profile" className="rounded-3 border border-rule bg-sheet px-4 pt-3 pb-3 shadow-1">
        <div className={classNames('grid gap-x-6 gap-y-4', b && 'grid-cols-2 max-md:grid-cols-1')}>
          {shown.map((reply) => (
            <RadialProfile
              key={name(reply)}
              title={b ? `Profile, ${reply === a ? 'A' : 'B'}` : 'Radial profile'}
              profile={reply.profile}
              radiusOfMaxWindM={reply.state.radiusOfMaxWindM}
              axes={axes}
              readM={held}
              onRead={(radiusM) => setReadM(Math.round(radiusM))}
              fileName={`${fileName}-profile${b ? (reply === a ? '-a' : '-b') : ''}`}
            />
          ))}
        </div>
        <div className="mt-2 flex flex-wrap items-center gap-x-4 gap-y-1 border-t border-rule pt-2.5">
          <p className="min-w-0 flex-1 basis-72 text-13" aria-live="polite">
            <b>At {decimal(held / 1000, 1)} km:</b> {readout} {label}.
          </p>
          <Slider
            label="Radius read out"
            stops={radii}
            value={held}
            valueText={(radius) => `${decimal(radius / 1000, 1)} km: ${readout} ${label}`}
            onChange={setReadM}
            ticks={[]}
            className="min-w-60 flex-1 basis-60"
          />
        </div>
      </section>
    </div>
  );
}

function FieldSkeleton({ pictures }: { pictures: number }) {
  return (
    <div className="grid grid-cols-2 gap-3.5 max-md:grid-cols-1" aria-hidden>
      {Array.from({ length: pictures }, (_, index) => (
        <div key={index} className="flex aspect-square flex-col gap-3 rounded-3 border border-rule bg-sheet p-4">
          <Skeleton width="40%" />
          <Skeleton className="flex-1" />
        </div>
      ))}
    </div>
  );
}
