import type { Draws } from '#contract/draws.ts';
import { useNarrow } from '../../../lib/use-narrow.ts';
import { useUnits } from '../../../lib/units.tsx';
import type { MapView } from '../../../ui/map/map-data.ts';
import { Segmented } from '../../../ui/segmented.tsx';
import { choiceOf, CHOICES, LEVELS, offeredGusts, viewOf, type EnhancedLevel } from '../map-view.ts';
import { DrawStepper } from './draw-stepper.tsx';

interface MapControlsProps {
  view: MapView;
  vortices: boolean;
  draws: Draws | null;
  draw: number | null;
  gustMs: number;
  thresholdsMs: readonly number[];
  onChange: (change: { view?: MapView; draw?: number; gustMs?: number }) => void;
}

const SELECT = 'h-7.5 rounded-2 border border-rule-strong bg-sheet px-2 text-13 text-ink shadow-2 pointer-coarse:h-11';

/** Which picture the map shows, and of which level, draw or gust. */
export function MapControls({ view, vortices, draws, draw, gustMs, thresholdsMs, onChange }: MapControlsProps) {
  const { gust, label } = useUnits();
  const narrow = useNarrow();
  const choice = choiceOf(view);
  const choose = (next: (typeof CHOICES)[number]['value']) => onChange({ view: viewOf(next) });
  const options = CHOICES.map((option) =>
    vortices || option.value === 'plain' ? option : { ...option, disabledReason: `${option.label} needs enhanced` },
  );
  return (
    <div className="flex min-w-0 flex-wrap items-start gap-2">
      {narrow ? (
        <select
          aria-label="Map shows"
          className={SELECT}
          value={choice}
          onChange={({ target }) => choose(target.value as typeof choice)}
        >
          {options.map((option) => (
            <option key={option.value} value={option.value} disabled={'disabledReason' in option}>
              {option.label}
            </option>
          ))}
        </select>
      ) : (
        <Segmented label="Map shows" value={choice} options={options} onChange={choose} className="shadow-2" />
      )}
      {choice === 'enhanced' && (
        <Segmented
          label="Enhanced level"
          value={view as EnhancedLevel}
          options={LEVELS}
          onChange={(level) => onChange({ view: level })}
          className="shadow-2"
        />
      )}
      {choice === 'draw' && draws && draw !== null && draws.draws.length > 0 && (
        <DrawStepper draws={draws} draw={draw} onDraw={(next) => onChange({ draw: next })} />
      )}
      {choice === 'chance' && (
        <select
          aria-label={`Gust, ${label}`}
          className={SELECT}
          value={gustMs}
          onChange={({ target }) => onChange({ gustMs: Number(target.value) })}
        >
          {offeredGusts(thresholdsMs, gustMs).map((offered) => (
            <option key={offered} value={offered}>
              {gust(offered)} {label}
            </option>
          ))}
        </select>
      )}
    </div>
  );
}
