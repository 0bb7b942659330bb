import { Check, Scale, TriangleAlert } from 'lucide-react';
import type { ReactNode } from 'react';
import type { SpreadReply } from '#contract/studies.ts';
import { CHAIN_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis, percentOf } from '../../../ui/charts/axis.ts';
import { Chip } from '../../../ui/chip.tsx';
import { Segmented } from '../../../ui/segmented.tsx';

type Intensity = SpreadReply['settings']['intensity'];
type Reading = SpreadReply['intensity']['pressure'];

interface IntensityCardProps {
  reply: SpreadReply;
  onIntensity: (intensity: Intensity) => void;
  /** What outside checks say of both sources, in figures; without them the words of the choice stand. */
  evidence?: ReactNode;
}

const CHOICE = CHAIN_CHOICES.find(({ key }) => key === 'intensity')!;
const SOURCES = [
  { value: 'pressure', label: 'Pressure' },
  { value: 'wind', label: 'Wind' },
] as const;

/** Both readings of the strongest fix at the same size, on one axis, and why pressure is the default. */
export function IntensityCard({ reply, onIntensity, evidence }: IntensityCardProps) {
  const { gust, label, toUnit } = useUnits();
  const { intensity, settings } = reply;
  const { pressure, wind } = intensity;
  // A fix given by one of the two alone is run by it.
  const used: Intensity = wind === null ? 'pressure' : pressure === null ? 'wind' : settings.intensity;
  const hPa = `${decimal(intensity.centralPressureHpa, 0)} hPa`;
  return (
    <section
      aria-label="Intensity source"
      className="flex flex-col rounded-3 border border-rule-strong bg-sheet shadow-2"
    >
      <header className="flex flex-wrap items-center gap-2 px-4.5 pt-3.5">
        <h2 className="text-18">Intensity source</h2>
        <Segmented
          label="Intensity source"
          value={settings.intensity}
          options={SOURCES}
          onChange={onIntensity}
          className="ml-auto"
        />
      </header>
      <p className="px-4.5 pt-1.5 pb-2 text-13 text-ink-2">
        Two readings of the strongest fix, number {intensity.fix + 1}
        {pressure && `, ${hPa}`}.
      </p>
      <dl className="grid grid-cols-[1.25fr_1fr] border-y border-rule bg-well">
        <Reading
          term="Pressure"
          reading={pressure}
          meaning={`maximum 1-min wind implied by ${hPa}`}
          missing="no pressure given"
          chip={used === 'pressure' ? 'default, used' : 'default'}
          used={used === 'pressure'}
        />
        <Reading
          term="Wind"
          reading={wind}
          meaning="maximum 1-min wind as reported"
          missing="no wind reported"
          chip={used === 'wind' ? 'used' : null}
          used={used === 'wind'}
        />
      </dl>
      {pressure && wind && <BothOnOneAxis pressureMs={pressure.maxWindMs} windMs={wind.maxWindMs} />}
      {pressure && wind && intensity.differ && (
        <p className="mx-4.5 mt-1.5 flex gap-2.25 rounded-2 bg-caution-tint px-3 py-2.5 text-13 leading-snug">
          <TriangleAlert size={16} strokeWidth={1.75} className="mt-px flex-none text-caution" aria-hidden />
          <span>
            <b>
              {gust(Math.abs(wind.maxWindMs - pressure.maxWindMs))} {label} apart.
            </b>{' '}
            Shape {decimal(wind.shapeB, 2)} for the reported wind against {decimal(intensity.relationB, 2)} from the
            relation: more than two standard deviations ({decimal(0.45, 2)}). Both maxima print on every result.
          </span>
        </p>
      )}
      <div className="pt-2.5">
        <h3 className="px-4.5 text-14">Why pressure is the default</h3>
        {evidence ?? <p className="px-4.5 pt-1 pb-3.5 text-13 text-ink-2">{CHOICE.reason}</p>}
      </div>
      {evidence && (
        <p className="mt-auto flex gap-2.25 border-t border-rule px-4.5 pt-2.5 pb-3 text-13 leading-snug">
          <Scale size={16} strokeWidth={1.75} className="mt-px flex-none text-ink-2" aria-hidden />
          <span>
            <b>Its price:</b> gusts of {decimal(toUnit(58), 0)} {label} and more come out about 6 % low. A track given
            by wind alone is run by wind.
          </span>
        </p>
      )}
    </section>
  );
}

interface ReadingProps {
  term: string;
  reading: Reading;
  meaning: string;
  missing: string;
  chip: string | null;
  used: boolean;
}

function Reading({ term, reading, meaning, missing, chip, used }: ReadingProps) {
  const { gust, label } = useUnits();
  return (
    <div className="min-w-0 border-rule py-2.5 pr-2 pl-4.5 last:border-l last:pl-3.5">
      <dt className="flex min-h-5.5 flex-wrap items-center gap-2">
        <b>{term}</b>
        {chip && (
          <Chip tone={used ? 'info' : 'idle'} icon={Check}>
            {chip}
          </Chip>
        )}
      </dt>
      <dd className="text-24 font-black tracking-tight">
        {reading ? gust(reading.maxWindMs) : '–'} {reading && <span className="text-14 tracking-normal">{label}</span>}
        <span className="block text-12 leading-snug font-normal tracking-normal text-ink-2">
          {reading ? `${meaning}, radius ${decimal(reading.radiusOfMaxWindM / 1000, 1)} km` : missing}
        </span>
      </dd>
    </div>
  );
}

function BothOnOneAxis({ pressureMs, windMs }: { pressureMs: number; windMs: number }) {
  const { gust, label, toUnit } = useUnits();
  const [low, high] = [Math.min(pressureMs, windMs), Math.max(pressureMs, windMs)];
  const axis = linearAxis(toUnit(low - 6), toUnit(high + 6), 6);
  const at = (speedMs: number) => percentOf(axis.at(toUnit(speedMs)));
  return (
    <div
      className="px-6 pt-3 pb-1.5"
      role="img"
      aria-label={`Pressure ${gust(pressureMs)}, wind ${gust(windMs)} ${label}`}
    >
      <span className="relative block h-6.5">
        <span className="absolute inset-x-0 top-3.25 h-px bg-chart-grid" />
        <span
          className="absolute top-3 h-0.5 bg-caution"
          style={{ left: at(low), width: percentOf(axis.at(toUnit(high)) - axis.at(toUnit(low))) }}
        />
        <span
          className="absolute top-1.5 size-3.5 -translate-x-1/2 rounded-pill bg-ribbon"
          style={{ left: at(pressureMs) }}
        />
        <span
          className="absolute top-1.5 size-3.5 -translate-x-1/2 rounded-pill border-[2.5px] border-ink-2 bg-sheet"
          style={{ left: at(windMs) }}
        />
      </span>
      <span className="relative block h-4.5 border-t border-rule text-12 text-ink-2">
        {axis.ticks.map((tick) => (
          <span key={tick} className="absolute top-0.5 -translate-x-1/2" style={{ left: percentOf(axis.at(tick)) }}>
            {decimal(tick, 0)}
          </span>
        ))}
      </span>
    </div>
  );
}
