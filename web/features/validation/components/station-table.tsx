import { Fragment, useState } from 'react';
import type { ComparedObservation, Validation } from '#contract/validation.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Card } from '../../../ui/card.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import { Table, Td, Th, Tr } from '../../../ui/table.tsx';
import { honestyOf, residualOf, ROLE_WORDS, signedShare, SOURCE_WORDS } from '../validation-words.ts';

/** Every observation with its role, what is known of it, and what the chain gives there. */
export function StationTable({ validation }: { validation: Validation }) {
  const [shown, setShown] = useState<'scored' | 'all'>('scored');
  const { gust, gustRange, label } = useUnits();
  const scored = validation.observations.filter(({ role }) => role === 'P');
  const rows = shown === 'scored' ? scored : validation.observations;
  return (
    <Card
      padded={false}
      title="Stations"
      aside={
        <Segmented
          label="Stations shown"
          value={shown}
          onChange={setShown}
          options={[
            { value: 'scored', label: `Scored ${scored.length}` },
            { value: 'all', label: `All ${validation.observations.length}` },
          ]}
        />
      }
    >
      <Table label="Stations with observed and modelled gusts" className="mt-2">
        <thead>
          <tr>
            <Th>Station</Th>
            <Th priority={2}>Role</Th>
            <Th numeric priority={3}>
              Reported, {label}
            </Th>
            <Th numeric className="whitespace-normal!">
              Observed, {label}
            </Th>
            <Th numeric className="whitespace-normal!">
              Pressure, {label}
            </Th>
            <Th numeric>Residual</Th>
            <Th numeric priority={2}>
              Wind, {label}
            </Th>
            <Th numeric priority={2}>
              Residual
            </Th>
          </tr>
        </thead>
        <tbody>
          {rows.map((one) => {
            const { default: byPressure, wind } = one.modelled;
            return (
              <Fragment key={one.id}>
                <Tr className="border-b-0 [&>td]:pt-1.5 [&>td]:align-top max-md:[&>td]:px-1.5 max-md:[&>td:first-child]:pl-4 max-md:[&>td:last-child]:pr-3">
                  <Td className="min-w-24 font-bold">{one.station}</Td>
                  <Td priority={2} className="text-13">
                    {ROLE_WORDS[one.role].name}
                  </Td>
                  <Td numeric priority={3}>
                    {one.gustMs === null
                      ? `mean ${one.sustainedMs === null ? '–' : gust(one.sustainedMs)}`
                      : gust(one.gustMs)}
                  </Td>
                  <Td numeric className="whitespace-nowrap">
                    {one.standardisedMs === null ? '–' : `${one.role === 'L' ? '≥ ' : ''}${gust(one.standardisedMs)}`}
                  </Td>
                  <Td numeric className="whitespace-nowrap">
                    {gust(byPressure.plainMs)}
                    <span className="block text-12 text-ink-2">{gustRange(byPressure.p5Ms, byPressure.p95Ms)}</span>
                  </Td>
                  <Td numeric className="font-bold">
                    {residualText(one, byPressure.plainMs)}
                  </Td>
                  <Td numeric priority={2} className="whitespace-nowrap">
                    {gust(wind.plainMs)}
                    <span className="block text-12 text-ink-2">{gustRange(wind.p5Ms, wind.p95Ms)}</span>
                  </Td>
                  <Td numeric priority={2}>
                    {residualText(one, wind.plainMs)}
                  </Td>
                </Tr>
                <Tr>
                  <td colSpan={8} className="px-4 pb-2 text-12 text-ink-2">
                    {one.storm}. <span className="md:hidden">{ROLE_WORDS[one.role].name}. </span>
                    {one.compareUntilUtc && `Until ${untilText(one.compareUntilUtc)}. `}
                    {honestyOf(one)}; {ground(one)}. {SOURCE_WORDS[one.sourceClass]}: <Source one={one} />
                    {one.note && `; ${one.note}`}.
                  </td>
                </Tr>
              </Fragment>
            );
          })}
        </tbody>
      </Table>
      <div className="border-t border-rule px-4 py-2.5 text-13 text-ink-2">
        <p>
          Observed: at 10 m and over 3 s in the same exposure. Modelled: plain gust, and under it the 5th to 95th
          percentile over 264 vortex draws, which isn’t a prediction interval. Residual: plain less observed, as a share
          of the observed.
        </p>
        <dl className="mt-1.5">
          {Object.values(ROLE_WORDS).map(({ name, meaning }) => (
            <div key={name}>
              <dt className="inline font-bold text-ink">{name}: </dt>
              <dd className="inline">{meaning}.</dd>
            </div>
          ))}
        </dl>
      </div>
    </Card>
  );
}

const ground = ({ roughnessLengthM, exposure }: ComparedObservation) =>
  roughnessLengthM === null ? `${exposure}, at sea` : `${exposure}, roughness ${roughnessLengthM} m`;

/** Times here are whole minutes, written 2022-09-28T15:00Z. */
const untilText = (time: string) => `${time.replace('T', ' ').replace('Z', '')} UTC`;

/** A lower bound is only ever fallen short of. */
const residualText = (one: ComparedObservation, modelledMs: number): string => {
  const residual = residualOf(one, modelledMs);
  if (residual === null) return '–';
  if (one.role === 'L') return residual < 0 ? `short, ${signedShare(residual)}` : 'not short';
  return signedShare(residual);
};

function Source({ one: { source, sourceUrl } }: { one: ComparedObservation }) {
  if (sourceUrl === null) return <>{source}</>;
  return (
    <a href={sourceUrl} target="_blank" rel="noreferrer" className="break-words text-link underline underline-offset-2">
      {source}
    </a>
  );
}
