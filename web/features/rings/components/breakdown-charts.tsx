import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { countAxis, linearAxis } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';
import { filmClock, filmTime, type FilmFrame } from '../film.ts';
import { LinePlot, type PlotLine } from './line-plot.tsx';

interface BreakdownChartsProps {
  frames: readonly FilmFrame[];
  index: number;
  hours: number;
}

const PANEL = 'rounded-3 border border-rule bg-sheet px-4 pt-3 pb-3 shadow-1';
const hoursOf = ({ timeS }: FilmFrame) => timeS / 3600;
const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹';
/** "−3.3 × 10⁻¹⁵". */
const inPowers = (value: number): string => {
  if (value === 0) return '0';
  const [digits = '', power = ''] = value.toExponential(1).split('e');
  const raised = [...power.replace('+', '')].map((sign) => (sign === '-' ? '⁻' : SUPERSCRIPTS[Number(sign)])).join('');
  return `${digits.replace('-', '−')} × 10${raised}`;
};
const hPa = ({ minPressurePa }: FilmFrame) => minPressurePa / 100;

/** Strongest wind anywhere against the mean round the ring, as shares of the wind the ring starts with. */
export function BreakdownWind({ frames, index, hours }: BreakdownChartsProps) {
  const { gust, label } = useUnits();
  const start = frames[0]?.meanMaxWindMs ?? 1;
  const x = frames.map(hoursOf);
  const strongest: PlotLine = {
    name: 'strongest anywhere',
    x,
    y: frames.map(({ maxWindMs }) => maxWindMs / start),
    stroke: 'var(--ribbon)',
  };
  const mean: PlotLine = {
    name: 'ring mean',
    x,
    y: frames.map(({ meanMaxWindMs }) => meanMaxWindMs / start),
    stroke: 'var(--thread)',
    dash: '5 4',
  };
  const lowest = Math.min(0.9, ...mean.y);
  const highest = Math.max(1.05, ...strongest.y);
  const last = frames.at(-1);
  const shown = frames[Math.min(index, frames.length - 1)];
  return (
    <div className={PANEL}>
      <ChartFrame
        title="Wind during breakdown"
        aside={`share of the starting ring mean, ${gust(start)} ${label}`}
        summary={
          last && frames.length > 1
            ? `Over ${filmTime(last.timeS)} the strongest wind goes from ${decimal(strongest.y[0]!, 2)} to ${decimal(strongest.y.at(-1)!, 2)} of the starting ring mean, the ring mean to ${decimal(mean.y.at(-1)!, 2)}.`
            : 'The wind is drawn once the breakdown is computed.'
        }
        fileName="ring-breakdown-wind"
        table={{
          columns: ['Time, h:min', `Strongest, ${label}`, `Ring mean, ${label}`, 'Strongest, share', 'Mean, share'],
          rows: frames.map((frame, at) => [
            filmClock(frame.timeS),
            gust(frame.maxWindMs),
            gust(frame.meanMaxWindMs),
            decimal(strongest.y[at]!, 3),
            decimal(mean.y[at]!, 3),
          ]),
        }}
      >
        {frames.length > 1 ? (
          <LinePlot
            x={linearAxis(0, hours, 6)}
            y={linearAxis(lowest, highest, 4)}
            lines={[strongest, mean]}
            band={[strongest, mean]}
            xText={(value) => `${decimal(value, Number.isInteger(value) ? 0 : 1)} h`}
            yText={(value) => decimal(value, 2)}
            cursor={shown && hoursOf(shown)}
            xName="after the start"
            className="h-28"
          />
        ) : (
          <p className="py-6 text-13 text-ink-2">Press play: the wind is drawn as the frames come.</p>
        )}
      </ChartFrame>
    </div>
  );
}

/** Vortices counted, lowest pressure, and how well what must be kept is kept. */
export function BreakdownMeasures({ frames, index, hours }: BreakdownChartsProps) {
  const shown = frames[Math.min(index, frames.length - 1)];
  const x = frames.map(hoursOf);
  const counted: PlotLine = { name: 'vortices', x, y: frames.map(({ vortices }) => vortices), stroke: 'var(--ribbon)' };
  const pressure: PlotLine = { name: 'lowest pressure', x, y: frames.map(hPa), stroke: 'var(--series-3)' };
  const time = linearAxis(0, hours, 4);
  const hour = (value: number) => `${decimal(value, Number.isInteger(value) ? 0 : 1)} h`;
  const waits = <p className="py-6 text-13 text-ink-2">Drawn with the frames.</p>;
  return (
    <div className={`${PANEL} grid grid-cols-3 gap-x-6 gap-y-4 max-lg:grid-cols-1`}>
      <ChartFrame
        title="Vortices counted"
        summary={`Separate vortices over time: ${frames.map((frame) => `${frame.vortices} at ${filmClock(frame.timeS)}`).join(', ')}.`}
        fileName="ring-breakdown-vortices"
        table={{
          columns: ['Time, h:min', 'Vortices'],
          rows: frames.map((frame) => [filmClock(frame.timeS), String(frame.vortices)]),
        }}
      >
        {frames.length > 1 ? (
          <LinePlot
            x={time}
            y={countAxis(Math.max(4, ...counted.y), 4)}
            lines={[counted]}
            xText={hour}
            yText={(value) => decimal(value, 0)}
            cursor={shown && hoursOf(shown)}
            xName="0 while the ring is whole"
            className="h-24"
          />
        ) : (
          waits
        )}
      </ChartFrame>
      <ChartFrame
        title="Minimum pressure"
        aside="hPa"
        summary={
          frames.length > 1
            ? `Lowest pressure by nonlinear balance, below the surroundings: ${decimal(hPa(frames[0]!), 1)} hPa at the start, ${decimal(hPa(frames.at(-1)!), 1)} hPa at the end.`
            : 'Drawn once the breakdown is computed.'
        }
        fileName="ring-breakdown-pressure"
        table={{
          columns: ['Time, h:min', 'Pressure, hPa'],
          rows: frames.map((frame) => [filmClock(frame.timeS), decimal(hPa(frame), 2)]),
        }}
      >
        {frames.length > 1 ? (
          <LinePlot
            x={time}
            y={linearAxis(Math.min(...pressure.y), Math.max(...pressure.y), 4)}
            lines={[pressure]}
            xText={hour}
            yText={(value) => decimal(value, 0)}
            cursor={shown && hoursOf(shown)}
            xName="below the surroundings"
            className="h-24"
          />
        ) : (
          waits
        )}
      </ChartFrame>
      <section aria-label="What is conserved">
        <h3 className="text-15">What is conserved</h3>
        <table className="mt-1.5 w-full text-13" aria-label="Conservation at the frame shown">
          <thead className="text-12 text-ink-2">
            <tr>
              <th scope="col" className="py-1 text-left font-normal">
                at {shown ? filmTime(shown.timeS) : 'the start'}
              </th>
              <th scope="col" className="py-1 text-right font-normal">
                of the start
              </th>
            </tr>
          </thead>
          <tbody className="[&_td]:text-right [&_th]:text-left [&_th]:font-normal [&_tr]:border-t [&_tr]:border-rule">
            <tr>
              <th scope="row" className="py-1">
                Circulation, change
              </th>
              <td>{shown ? inPowers(shown.circulationResidual) : '–'}</td>
            </tr>
            <tr>
              <th scope="row" className="py-1">
                Energy
              </th>
              <td>{shown ? decimal(shown.energyShare, 4) : '–'}</td>
            </tr>
            <tr>
              <th scope="row" className="py-1">
                Enstrophy
              </th>
              <td>{shown ? decimal(shown.enstrophyShare, 4) : '–'}</td>
            </tr>
          </tbody>
        </table>
        <p className="mt-1.5 text-12 text-ink-2">
          Circulation is kept to rounding. A little viscosity takes energy slowly, and enstrophy as filaments thin out;
          rebuilding by heating puts both back.
        </p>
      </section>
    </div>
  );
}
