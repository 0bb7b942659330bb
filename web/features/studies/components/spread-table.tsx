import type { SpreadReply, SpreadRow } from '#contract/studies.ts';
import { columnRange, columnScale } from '../../../lib/money.ts';
import { decimalsFor, signed } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';

/** The same facts in figures: what came out, not only what changed. */
export function SpreadTable({ reply }: { reply: SpreadReply }) {
  const { gust, gustRange, label, toUnit } = useUnits();
  const { currency, settings, base, rows } = reply;
  const largest = Math.max(1, ...rows.map(({ grossChangeMinor }) => Math.abs(grossChangeMinor ?? 0)));
  const scale =
    currency === null
      ? null
      : columnScale(Math.max(largest, ...[base, ...rows].map(({ grossMinor }) => grossMinor?.p95 ?? 0)), currency);
  const gusts = (peak: SpreadRow['peakGustMs'], on: boolean) =>
    peak === null ? '–' : on ? gustRange(peak.p5, peak.p95) : `plain ${gust(peak.plain)}`;
  const money = (gross: SpreadRow['grossMinor'], on: boolean) => {
    if (gross === null || currency === null) return '–';
    return on
      ? columnRange(gross.p5, gross.p95, scale!.minor)
      : `plain ${columnRange(gross.plain, gross.plain, scale!.minor)}`;
  };
  const layerOn = (row: SpreadRow) => (row.choice === 'mesovortices' ? !settings.mesovortices : settings.mesovortices);
  return (
    <section
      aria-label="Settings, one at a time, in figures"
      className="rounded-3 border border-rule bg-sheet shadow-1"
    >
      <Table label="Results with each setting changed alone">
        <thead>
          <tr>
            <Th>Setting</Th>
            <Th>From</Th>
            <Th>To</Th>
            <Th numeric>Peak gust, {label}</Th>
            <Th numeric>Change</Th>
            <Th numeric>Event gross{scale && `, ${scale.header}`}</Th>
            <Th numeric>Change</Th>
          </tr>
        </thead>
        <tbody>
          <Tr>
            <Td className="font-bold">As it stands</Td>
            <Td />
            <Td />
            <Td numeric>{gusts(base.peakGustMs, settings.mesovortices)}</Td>
            <Td />
            <Td numeric>{money(base.grossMinor, settings.mesovortices)}</Td>
            <Td />
          </Tr>
          {rows.map((row) => (
            <Tr key={`${row.choice} ${row.to.value}`}>
              <Td className="min-w-40 py-1.5">
                <b>{row.title}</b>
                {row.reason && <span className="block text-12 text-ink-2">{row.reason}</span>}
              </Td>
              <Td className="text-13">{row.from.title}</Td>
              <Td className="min-w-44 py-1.5 text-13">
                {row.to.title}
                <span className="block text-12 text-ink-2">{row.to.source}</span>
              </Td>
              <Td numeric className="whitespace-nowrap">
                {gusts(row.peakGustMs, layerOn(row))}
              </Td>
              <Td numeric className="font-bold whitespace-nowrap">
                {row.peakGustChangeMs === null ? '–' : signed(toUnit(row.peakGustChangeMs), 1)}
              </Td>
              <Td numeric className="whitespace-nowrap">
                {money(row.grossMinor, layerOn(row))}
              </Td>
              <Td numeric className="font-bold whitespace-nowrap">
                {row.grossChangeMinor === null || currency === null
                  ? '–'
                  : signed(row.grossChangeMinor / scale!.minor, decimalsFor(largest / scale!.minor))}
              </Td>
            </Tr>
          ))}
        </tbody>
      </Table>
    </section>
  );
}
