import { useState } from 'react';
import { TriangleAlert } from 'lucide-react';
import { classNames } from '../../../lib/class-names.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Card } from '../../../ui/card.tsx';
import { TextField } from '../../../ui/field.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { Slider } from '../../../ui/slider.tsx';
import {
  DEFAULT_STUDY,
  EYE_LIMITS,
  INLAND_LIMITS,
  RADIUS_LIMITS,
  stopsOf,
  WIDTH_LIMITS,
  WIND_LIMITS,
  type RingStudy,
} from '../ring-study.ts';

interface RingControlsProps {
  study: RingStudy;
  onChange: (change: Partial<RingStudy>) => void;
}

/** The ring's five numbers, and what its wind means. */
export function RingControls({ study, onChange }: RingControlsProps) {
  const { label, toUnit, fromUnit } = useUnits();
  const wind = (value: number) => decimal(toUnit(value), label === 'm/s' ? 0 : 1);
  return (
    <Card
      title="The ring"
      aside={
        <button type="button" className="font-bold text-link" onClick={() => onChange(DEFAULT_STUDY)}>
          Reset
        </button>
      }
    >
      <div className="flex flex-col gap-3">
        <NumberControl
          label="Maximum wind, 1 min"
          unit={label}
          limits={WIND_LIMITS}
          value={study.maxWindMs}
          decimals={0}
          scale={{ to: toUnit, from: fromUnit, text: wind }}
          onChange={(maxWindMs) => onChange({ maxWindMs })}
        />
        <NumberControl
          label="Radius of maximum wind"
          unit="km"
          limits={RADIUS_LIMITS}
          value={study.radiusKm}
          decimals={1}
          onChange={(radiusKm) => onChange({ radiusKm })}
        />
        <NumberControl
          label="Ring width"
          unit="of radius"
          limits={WIDTH_LIMITS}
          ends={['thin', 'thick']}
          value={study.width}
          decimals={2}
          onChange={(width) => onChange({ width })}
        />
        <NumberControl
          label="Eye vorticity ratio"
          unit=""
          limits={EYE_LIMITS}
          ends={['empty eye', 'filled']}
          value={study.eye}
          decimals={2}
          onChange={(eye) => onChange({ eye })}
        />
        <NumberControl
          label="Hours inland"
          unit="h"
          limits={INLAND_LIMITS}
          value={study.hoursInland}
          decimals={1}
          onChange={(hoursInland) => onChange({ hoursInland })}
        />
        <div className="border-t border-rule pt-3">
          <div className="flex items-center justify-between gap-3">
            <span className="text-13 font-bold">Ring wind is</span>
            <Segmented
              label="Ring wind is"
              value={study.windIs}
              options={[
                { value: 'mean', label: 'mean' },
                { value: 'peak', label: 'peak' },
              ]}
              onChange={(windIs) => onChange({ windIs })}
            />
          </div>
          <p className="mt-1.5 text-12 text-ink-2">
            {study.windIs === 'mean'
              ? 'The wind is the mean round the ring; the peaks of passing vortices exceed it.'
              : 'The wind already holds a peak: the mean behind it is lower, and vortices bring it back up.'}
          </p>
        </div>
        <p className="flex gap-2.25 rounded-2 bg-caution-tint px-3 py-2.5 text-12 leading-snug">
          <TriangleAlert size={15} strokeWidth={1.75} className="mt-px flex-none text-caution" aria-hidden />
          <span>
            Ring width and eye ratio dominate and are judged, not measured. Read growth and gusts as good to a factor of
            2.
          </span>
        </p>
      </div>
    </Card>
  );
}

interface NumberControlProps {
  label: string;
  unit: string;
  limits: { least: number; most: number; step: number };
  /** Words beside the ends. */
  ends?: readonly [string, string];
  value: number;
  decimals: number;
  /** Where it is shown in the person's unit. */
  scale?: { to: (value: number) => number; from: (shown: number) => number; text: (value: number) => string };
  onChange: (value: number) => void;
}

/** A slider with the same number to type. */
function NumberControl({ label, unit, limits, ends, value, decimals, scale, onChange }: NumberControlProps) {
  const text = scale?.text ?? ((at: number) => decimal(at, decimals));
  const [typed, setTyped] = useState<string | null>(null);
  const read = typed === null || typed.trim() === '' ? NaN : Number(typed.replace('−', '-'));
  const meant = scale ? scale.from(read) : read;
  // The ends are typed as they are written, rounded.
  const slack = scale ? 0.06 : 1e-9;
  const isGood = meant >= limits.least - slack && meant <= limits.most + slack;
  const end = (at: number) => scale?.text(at) ?? String(at);
  const low = `${end(limits.least)}${ends ? ` ${ends[0]}` : ''}`;
  const high = `${end(limits.most)}${ends ? ` ${ends[1]}` : ''}`;
  return (
    <div>
      <div
        className={classNames(
          'grid items-start gap-x-2',
          unit.length > 4 ? 'grid-cols-[minmax(0,1fr)_7.5rem]' : 'grid-cols-[minmax(0,1fr)_6rem]',
        )}
      >
        <span className="pt-1.75 text-13 font-bold" aria-hidden>
          {label}
        </span>
        <TextField
          label={`${label}, typed`}
          labelHidden
          inputMode="decimal"
          autoComplete="off"
          unit={unit || undefined}
          value={typed ?? text(value)}
          error={typed !== null && !isGood ? `Give ${text(limits.least)} to ${text(limits.most)}.` : undefined}
          onChange={(event) => {
            setTyped(event.target.value);
            const next = Number(event.target.value.trim() === '' ? NaN : event.target.value.replace('−', '-'));
            const inner = scale ? scale.from(next) : next;
            if (inner >= limits.least - slack && inner <= limits.most + slack)
              onChange(Math.min(limits.most, Math.max(limits.least, inner)));
          }}
          onBlur={() => setTyped(null)}
        />
      </div>
      <Slider
        label={label}
        stops={stopsOf(limits)}
        value={value}
        valueText={(at) => `${text(at)} ${unit}`.trim()}
        onChange={(next) => {
          setTyped(null);
          onChange(next);
        }}
        ticks={[]}
      />
      <div aria-hidden className="flex justify-between text-12 text-ink-2">
        <span>{low}</span>
        <span>{high}</span>
      </div>
    </div>
  );
}
