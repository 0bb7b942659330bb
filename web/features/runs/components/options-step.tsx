import { useState, type ReactNode } from 'react';
import { Gauge } from 'lucide-react';
import { Regime, type TrackResolution } from '#contract/scenarios.ts';
import { CHAIN_CHOICES, chosenInWords, chosenOf } from '#contract/wind-choice-catalogue.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import type { RunSetup } from '../run-setup.ts';
import { DEFAULT_CHOICES, WindChoicesDialog } from './wind-choices-dialog.tsx';

type Options = RunSetup['options'];

interface OptionsStepProps {
  options: Options;
  onChange: (options: Options) => void;
  /** Maxima of the strongest chosen track; null until it is read. */
  strongest: { name: string; maxima: TrackResolution['maxima'] } | null;
  /** Options that depart from the calibration's own. */
  departures: readonly string[];
  calibration: string | null;
}

const REGIME = CHAIN_CHOICES.find(({ key }) => key === 'regime')!;
const regimeTitle = (regime: string) => REGIME.values.find(({ value }) => value === regime)!.title;

const LOWEST_MS = 20;
const HIGHEST_MS = 85;

export function OptionsStep({ options, onChange, strongest, departures, calibration }: OptionsStepProps) {
  return (
    <>
      <div className="mt-1 flex flex-wrap gap-x-3.5 gap-y-3">
        <Option label="Eyewall vortices">
          <Segmented
            label="Eyewall vortices"
            value={options.mesovortices ? 'on' : 'off'}
            options={[
              { value: 'on', label: 'Plain and enhanced' },
              { value: 'off', label: 'Plain' },
            ]}
            onChange={(value) => onChange({ ...options, mesovortices: value === 'on' })}
          />
        </Option>
        {options.mesovortices && (
          <Option label={REGIME.title}>
            <Segmented
              label={REGIME.title}
              value={options.regime ?? 'mixed'}
              options={Regime.options.map((value) => ({ value, label: regimeTitle(value) }))}
              onChange={(regime) => {
                const { regime: _, ...rest } = options;
                onChange(regime === 'mixed' ? rest : { ...rest, regime });
              }}
            />
          </Option>
        )}
        <Option label="Track wind is">
          <Segmented
            label="Track wind is"
            value={options.anchor}
            options={[
              { value: 'auto', label: 'auto' },
              { value: 'mean', label: 'mean' },
              { value: 'peak', label: 'peak' },
            ]}
            onChange={(anchor) => onChange({ ...options, anchor })}
          />
        </Option>
        <Option label="Intensity from">
          <Segmented
            label="Intensity from"
            value={options.intensity}
            options={[
              { value: 'pressure', label: 'pressure' },
              { value: 'wind', label: 'wind' },
            ]}
            onChange={(intensity) => onChange({ ...options, intensity })}
          />
        </Option>
        <Option label="Gust chance above">
          <span className="flex gap-1.5">
            {options.gustThresholdsMs.map((threshold, index) => (
              <Threshold
                key={index}
                number={index + 1}
                speedMs={threshold}
                onSpeed={(speedMs) => {
                  const next: Options['gustThresholdsMs'] = [...options.gustThresholdsMs];
                  next[index] = speedMs;
                  onChange({ ...options, gustThresholdsMs: next });
                }}
              />
            ))}
          </span>
        </Option>
      </div>
      <WindChoicesRow options={options} onChange={onChange} />
      <StrongestFix strongest={strongest} intensity={options.intensity} />
      {departures.length > 0 && (
        <p className="mt-1 text-13 text-caution">
          Departs from {calibration} in {departures.join(' and ')}; the run says so.
        </p>
      )}
    </>
  );
}

/** The published relations behind the wind: all default, or which ones aren’t. */
function WindChoicesRow({ options, onChange }: Pick<OptionsStepProps, 'options' | 'onChange'>) {
  const [open, setOpen] = useState(false);
  const words = chosenInWords(options.wind);
  return (
    <div className="mt-3 border-t border-rule pt-2.5 text-13">
      <div className="flex flex-wrap items-center gap-x-2.5 gap-y-1">
        <b>Wind field choices</b>
        {words.length === 0 ? <Chip tone="done">all default</Chip> : <Chip tone="caution">{words.length} changed</Chip>}
        <button
          type="button"
          className="-mr-2 ml-auto rounded-1 px-2 py-1 text-14 font-bold text-link hover:bg-hover pointer-coarse:min-h-11"
          onClick={() => setOpen(true)}
        >
          Change<span className="sr-only"> wind field choices</span>
        </button>
      </div>
      {words.length > 0 && (
        <ul className="mt-1 list-disc pl-4.5 text-ink-2">
          {words.map((word) => (
            <li key={word}>{word}</li>
          ))}
        </ul>
      )}
      {open && (
        <WindChoicesDialog
          chosen={options.wind ?? DEFAULT_CHOICES}
          onChoose={(wind) => {
            const { wind: _, ...rest } = options;
            onChange(chosenOf(wind).length === 0 ? rest : { ...rest, wind });
          }}
          onClose={() => setOpen(false)}
        />
      )}
    </div>
  );
}

function Option({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div>
      <div className="mb-1 text-13 font-bold">{label}</div>
      {children}
    </div>
  );
}

/** Both maxima of the strongest fix, and which of them this run takes. */
function StrongestFix({ strongest, intensity }: Pick<OptionsStepProps, 'strongest'> & Pick<Options, 'intensity'>) {
  const { gust, label } = useUnits();
  if (!strongest) return null;
  const { reportedMs, pressureImpliedMs } = strongest.maxima;
  // A fix given by one of the two alone is run by it.
  const used = reportedMs === null ? 'pressure' : pressureImpliedMs === null ? 'wind' : intensity;
  const word = (source: 'pressure' | 'wind') => (used === source ? ', used' : '');
  return (
    <p className="mt-2 flex gap-2 text-13 text-ink-2">
      <Gauge size={16} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />
      <span>
        Strongest fix of {strongest.name}: reported wind{' '}
        {reportedMs === null ? (
          'not given'
        ) : (
          <b className="text-ink">{`${gust(reportedMs)} ${label}${word('wind')}`}</b>
        )}
        ; its pressure gives{' '}
        {pressureImpliedMs === null ? (
          'nothing, none was given'
        ) : (
          <b className="text-ink">{`${gust(pressureImpliedMs)} ${label}${word('pressure')}`}</b>
        )}
        . Pressure is the default.
      </span>
    </p>
  );
}

function Threshold({
  number,
  speedMs,
  onSpeed,
}: {
  number: number;
  speedMs: number;
  onSpeed: (speedMs: number) => void;
}) {
  const { label, toUnit, fromUnit } = useUnits();
  const [text, setText] = useState<string | null>(null);
  const shown = String(Math.round(toUnit(speedMs) * 10) / 10);
  const typed = text === null ? speedMs : fromUnit(Number(text.replace(',', '.')));
  const fault = !(typed >= LOWEST_MS - 1e-9 && typed <= HIGHEST_MS + 1e-9);
  return (
    <label className="relative block">
      <span className="sr-only">
        Gust threshold {number}, {label}
      </span>
      <input
        inputMode="decimal"
        aria-invalid={fault}
        title={
          fault ? `Between ${toUnit(LOWEST_MS).toFixed(0)} and ${toUnit(HIGHEST_MS).toFixed(0)} ${label}` : undefined
        }
        value={text ?? shown}
        onChange={(event) => setText(event.target.value)}
        onBlur={() => {
          if (text !== null && !fault && text !== shown) onSpeed(Math.round(typed * 1000) / 1000);
          setText(null);
        }}
        className="h-7.5 w-20 rounded-2 border border-edge bg-sheet pr-10 pl-2.5 text-14 aria-invalid:border-2 aria-invalid:border-error pointer-coarse:h-10.5"
      />
      <span
        aria-hidden
        className="pointer-events-none absolute inset-y-0 right-2 grid place-items-center text-13 text-ink-2"
      >
        {label}
      </span>
    </label>
  );
}
