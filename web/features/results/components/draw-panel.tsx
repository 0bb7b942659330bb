import { useMemo } from 'react';
import type { Draw, DrawSites } from '#contract/draws.ts';
import type { Run, RunScenario } from '#contract/runs.ts';
import { failureOf } from '../../../api/failure.ts';
import { moneyRange, shortMoney } from '../../../lib/money.ts';
import { count, counted, decimal, range } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Button } from '../../../ui/button.tsx';
import { GustHistogram } from '../../../ui/charts/gust-histogram.tsx';
import { placeByTrack } from '../../../ui/map/geography.ts';
import type { MapSites } from '../../../ui/map/map-data.ts';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { gustsInDraw, sitesByGust } from '../draw-sites.ts';

interface DrawPanelProps {
  run: Run;
  scenario: RunScenario;
  draw: Draw;
  sites: MapSites | null;
  inDraw: DrawSites | null;
  /** The gusts shown are those of the draw before. */
  waits: boolean;
  error: Error | null;
  onRetry: () => void;
  /** Index into the sites. */
  chosen: number | null;
  onExplain: () => void;
}

/** What this one draw does to the sites, beside what all of them do. */
export function DrawPanel(props: DrawPanelProps) {
  const { run, scenario, draw, sites, inDraw, waits, error, onRetry, chosen, onExplain } = props;
  const { gust, label } = useUnits();
  const gusts = useMemo(
    () => (sites && inDraw && inDraw.reason === null ? gustsInDraw(sites, inDraw) : null),
    [sites, inDraw],
  );
  const bins = useMemo(() => gusts && { draw: sitesByGust(gusts), plain: sitesByGust(sites!.plainMs) }, [gusts, sites]);
  const { gross } = scenario.result!;
  const above = scenario.result!.above.at(-1)!;
  const inThis = draw.sitesAbove?.at(-1) ?? gusts?.filter((one) => one !== null && one >= above.gustMs).length;
  return (
    <>
      <section>
        <h2 className="text-15">In this draw</h2>
        <p className="mt-1 text-14 text-ink-2">
          <b className="text-ink">{inThis === undefined ? 'Counting sites' : counted(inThis, 'site')}</b> above{' '}
          {gust(above.gustMs).replace(/\.0$/, '')} {label}. Over all draws: {range(count(above.p5), count(above.p95))},
          central {count(above.p50)}.
        </p>
        <p className="mt-1 text-13 text-ink-2">
          Draw {draw.draw}: event gross {shortMoney(draw.grossMinor, run.currency)}, rank {draw.rank} of 264 by loss
          {gross && `; over all draws ${moneyRange(gross.p5, gross.p95, run.currency)}`}
          {draw.strongestMs !== null && `; strongest gust at a site ${gust(draw.strongestMs)} ${label}`}. Vortex
          strength {draw.strength}, start {decimal(draw.phaseDeg, 1)}°.
        </p>
      </section>
      {error ? (
        <ProblemNotice title="The gusts of this draw weren’t read" {...failureOf(error)} onRetry={onRetry} />
      ) : inDraw?.reason ? (
        <p className="text-13 text-ink-2">{inDraw.reason}</p>
      ) : (
        <div aria-busy={waits} className={waits ? 'opacity-50' : undefined}>
          {bins ? (
            <GustHistogram
              enhanced={bins.draw}
              plain={bins.plain}
              thresholdsMs={run.options.gustThresholdsMs}
              vortices
              bars="this draw"
              fileName={`${run.number}-draw-${draw.draw}-sites-by-gust`}
            />
          ) : (
            <p className="text-13 text-ink-2">Working out the sites of this draw …</p>
          )}
        </div>
      )}
      {sites && chosen !== null && (
        <ChosenSite
          scenario={scenario}
          sites={sites}
          index={chosen}
          gustMs={waits ? null : (gusts?.[chosen] ?? null)}
          onExplain={onExplain}
        />
      )}
    </>
  );
}

interface ChosenSiteProps {
  scenario: RunScenario;
  sites: MapSites;
  index: number;
  /** Null while it isn’t known. */
  gustMs: number | null;
  onExplain: () => void;
}

function ChosenSite({ scenario, sites, index, gustMs, onExplain }: ChosenSiteProps) {
  const { gust, gustRange, label } = useUnits();
  const place = placeByTrack(scenario.path, [sites.longitude[index]!, sites.latitude[index]!]);
  const [low, high, plain] = [sites.p5Ms[index], sites.p95Ms[index], sites.plainMs[index]];
  const rows = [
    ['This draw', gustMs === null ? 'not known yet' : gust(gustMs)],
    ['Enhanced, 5–95 %', low != null && high != null ? gustRange(low, high) : 'no range'],
    ['Plain', plain != null ? gust(plain) : 'not scored'],
    ['From the track', place ? `${decimal(place.distanceKm, 0)} km, ${place.side}` : 'no track'],
  ];
  return (
    <section aria-label="Chosen site" className="border-t border-rule pt-3">
      <p className="text-12 text-ink-2">Chosen site; gusts in {label}</p>
      <h3 className="text-16">{sites.ref[index]}</h3>
      <dl className="mt-1.5 text-13">
        {rows.map(([name, value]) => (
          <div key={name} className="flex items-baseline gap-3 py-1">
            <dt className="flex-1 text-ink-2">{name}</dt>
            <dd className="font-bold">{value}</dd>
          </div>
        ))}
      </dl>
      <Button variant="quiet" size="small" className="-ml-2" onClick={onExplain}>
        Why this gust
      </Button>
    </section>
  );
}
