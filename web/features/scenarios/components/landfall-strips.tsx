import type { VariantsReply } from '#contract/variants.ts';
import { clock, shortDay, utc } from '../../../lib/dates.ts';
import { counted, decimal, range, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { linearAxis, tickDecimals } from '../../../ui/charts/axis.ts';
import { ChartFrame } from '../../../ui/charts/chart-frame.tsx';
import { DotStrip } from '../../../ui/charts/dot-strip.tsx';
import { timeTicks } from '../../../ui/charts/time-axis.ts';
import { placeWords, shiftKm } from '../landfalls.ts';

const extent = (values: readonly number[]): [number, number] => [Math.min(...values), Math.max(...values)];
const moment = (instant: string | Date) => `${shortDay(instant)} ${clock(instant)}`;

const everyVariant = (count: number) =>
  count === 1 ? 'The variant' : count === 2 ? 'Both variants' : `All ${count} variants`;

interface LandfallStripsProps {
  reply: VariantsReply;
  fileName: string;
}

/** Where, how strong and when each variant first comes ashore; and how strong it ever is. */
export function LandfallStrips({ reply, fileName }: LandfallStripsProps) {
  const { gust, gustRange, label, toUnit } = useUnits();
  const { base, variants } = reply;
  const ashore = variants.filter(({ landfall }) => landfall !== null);
  const shifts = ashore.map((variant) => shiftKm(base, variant)).filter((km) => km !== null);
  const landfallWinds = ashore.map(({ landfall }) => landfall!.maxWindMs);
  const times = ashore.map(({ landfall }) => Date.parse(landfall!.time));
  const peaks = variants.map(({ maxWindMs }) => maxWindMs);
  const baseTime = base.landfall ? Date.parse(base.landfall.time) : null;

  const windStrip = (title: string, values: readonly number[], central: number | null) => {
    const all = [...values, ...(central === null ? [] : [central])].map(toUnit);
    const axis = linearAxis(...extent(all), 4);
    const decimals = tickDecimals(axis);
    return (
      <DotStrip
        title={title}
        range={`${gustRange(...extent(values))} ${label}`}
        axis={axis}
        ticks={axis.ticks.map((at) => ({ at, label: decimal(at, decimals) }))}
        values={values.map(toUnit)}
        central={central === null ? null : toUnit(central)}
      />
    );
  };
  const shiftAxis = shifts.length > 0 ? linearAxis(...extent([...shifts, 0]), 4) : null;
  const [first, last] = times.length > 0 ? extent(baseTime === null ? times : [...times, baseTime]) : [0, 0];
  const span = Math.max(last - first, 3_600_000);
  const timeAxis = { at: (timeMs: number) => (timeMs - first + 0.04 * span) / (1.08 * span) };

  const words =
    ashore.length === 0
      ? `None of ${counted(variants.length, 'variant')} comes ashore.`
      : `${ashore.length === variants.length ? everyVariant(variants.length) : `${ashore.length} of ${variants.length} variants`} ${ashore.length === 1 ? 'comes' : 'come'} ashore, with ${gustRange(...extent(landfallWinds))} ${label}, ${moment(new Date(Math.min(...times)))} to ${moment(new Date(Math.max(...times)))} UTC.`;

  return (
    <ChartFrame
      title="First landfall"
      aside="maximum 1-min wind; the long mark is the track as saved"
      summary={words}
      fileName={fileName}
      table={{
        columns: [
          'Variant',
          'Landfall',
          'From central, km',
          'Time, UTC',
          `Wind ashore, ${label}`,
          `Strongest, ${label}`,
        ],
        rows: [base, ...variants].map((variant, index) => {
          const { landfall } = variant;
          const shift = index === 0 ? null : shiftKm(base, variant);
          return [
            variant.name,
            landfall ? placeWords(landfall) : 'none',
            shift === null ? '' : shift === 0 ? '0' : `${decimal(Math.abs(shift), 0)} ${shift > 0 ? 'right' : 'left'}`,
            landfall ? utc(landfall.time).replace(' UTC', '') : '',
            landfall ? gust(landfall.maxWindMs) : '',
            gust(variant.maxWindMs),
          ];
        }),
      }}
    >
      <p className="mt-1 mb-1.5 text-13 text-ink-2">{words}</p>
      {shiftAxis && (
        <DotStrip
          title="Place"
          range={`${range(signed(Math.min(...shifts), 0), signed(Math.max(...shifts), 0))} km, right +`}
          axis={shiftAxis}
          ticks={shiftAxis.ticks.map((at) => ({ at, label: at === 0 ? 'central' : signed(at, 0) }))}
          values={shifts}
          central={0}
        />
      )}
      {landfallWinds.length > 0 && windStrip('Wind ashore', landfallWinds, base.landfall?.maxWindMs ?? null)}
      {times.length > 0 && (
        <DotStrip
          title="Time, UTC"
          range={
            times.length === 1
              ? moment(new Date(times[0]!))
              : `${moment(new Date(Math.min(...times)))} to ${moment(new Date(Math.max(...times)))}`
          }
          axis={timeAxis}
          ticks={timeTicks(first, last, 4).map(({ timeMs, label: text }) => ({ at: timeMs, label: text }))}
          values={times}
          central={baseTime}
        />
      )}
      {windStrip('Strongest anywhere', peaks, base.maxWindMs)}
    </ChartFrame>
  );
}
