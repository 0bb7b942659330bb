import type { RingReply } from '#contract/rings.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';
import { LinePlot } from './line-plot.tsx';

/** The ring's own vorticity and wind by distance from the centre. */
export function RingProfile({ ring, radiusKm }: { ring: RingReply; radiusKm: number }) {
  const { gust, label, toUnit } = useUnits();
  const { radiusM, vorticityPerS, windMs } = ring.profile;
  const x = radiusM.map((metres) => metres / 1000);
  const radius = linearAxis(0, x.at(-1) ?? 60, 4);
  const vorticity = vorticityPerS.map((value) => value * 1000);
  const km = (value: number) => decimal(value, 0);
  return (
    <div className="rounded-3 border border-rule bg-sheet px-4 pt-3 pb-3 shadow-1">
      <ChartFrame
        title="Profile of the ring"
        aside="dashed: radius of maximum wind"
        summary={`Vorticity ${decimal(vorticity[0] ?? 0, 2)} in the eye and up to ${decimal(Math.max(...vorticity), 2)} thousandths per second in the ring; wind up to ${gust(Math.max(...windMs))} ${label}.`}
        fileName="ring-profile"
        table={{
          columns: ['Radius, km', 'Vorticity, 10⁻³ s⁻¹', `Wind, ${label}`],
          rows: x.map((at, k) => [decimal(at, 1), decimal(vorticity[k]!, 3), gust(windMs[k]!)]),
        }}
      >
        <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
          <LinePlot
            x={radius}
            y={linearAxis(0, Math.max(...vorticity), 4)}
            lines={[{ name: 'vorticity, 10⁻³ s⁻¹', x, y: vorticity, stroke: 'var(--ribbon)' }]}
            xText={km}
            yText={(value) => decimal(value, 0)}
            dashedAt={radiusKm}
            xName="km from the centre"
            className="h-24"
          />
          <LinePlot
            x={radius}
            y={linearAxis(0, toUnit(Math.max(...windMs)), 4)}
            lines={[{ name: `wind, ${label}`, x, y: windMs.map(toUnit), stroke: 'var(--ink)' }]}
            xText={km}
            yText={(value) => decimal(value, 0)}
            dashedAt={radiusKm}
            xName="km from the centre"
            className="h-24"
          />
        </div>
      </ChartFrame>
    </div>
  );
}
