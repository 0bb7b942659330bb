import { useQuery } from '@tanstack/react-query';
import { ChevronDown, ChevronUp, HardHat } from 'lucide-react';
import { ENGINEERING_NOTE } from '#contract/notices.ts';
import type { Run, RunScenario, SiteDetail } from '#contract/runs.ts';
import { ageWords } from '#contract/track-age.ts';
import { failureOf } from '../../../api/failure.ts';
import { utc } from '../../../lib/dates.ts';
import { exactMoney, moneyRangeParts, shortMoney } from '../../../lib/money.ts';
import { decimal, percent, range } from '../../../lib/numbers.ts';
import { useDelayed } from '../../../lib/use-delayed.ts';
import { useUnits } from '../../../lib/units.tsx';
import { IconButton } from '../../../ui/button.tsx';
import { GustLadder } from '../../../ui/charts/gust-ladder.tsx';
import { TimeSeries } from '../../../ui/charts/time-series.tsx';
import { Chip } from '../../../ui/chip.tsx';
import { Drawer } from '../../../ui/drawer.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';
import { siteQuery, type ResultAddress } from '../result-queries.ts';
import { noRangeReason } from '../result-words.ts';
import { buildingText, fetchRows, ladderRungs } from '../site-words.ts';
import { Drivers } from './drivers.tsx';
import { TerrainEffects } from './terrain-effects.tsx';

interface SiteDrawerProps {
  run: Run;
  scenario: RunScenario;
  siteNo: number;
  onPrevious: (() => void) | undefined;
  onNext: (() => void) | undefined;
  onClose: () => void;
  className?: string;
}

/** Why this gust here, and what it does to this building and its policy. */
export function SiteDrawer({ run, scenario, siteNo, onPrevious, onNext, onClose, className }: SiteDrawerProps) {
  const query = useQuery(siteQuery({ runId: run.id, runScenarioId: scenario.id }, siteNo));
  const site = query.data;
  const waits = useDelayed(query.isPending);
  return (
    <Drawer
      title={
        site ? (
          <>
            {site.siteRef}{' '}
            <span className="text-15 font-normal tracking-normal text-ink-2">
              {[site.label, site.town].filter(Boolean).join(', ')}
            </span>
          </>
        ) : (
          `Site ${siteNo}`
        )
      }
      onClose={onClose}
      controls={
        <>
          <IconButton label="Previous site" icon={ChevronUp} aria-disabled={!onPrevious} onClick={onPrevious} />
          <IconButton label="Next site" icon={ChevronDown} aria-disabled={!onNext} onClick={onNext} />
        </>
      }
      footer={
        <span className="flex items-center gap-2.5">
          <HardHat size={16} strokeWidth={1.75} className="flex-none text-caution" aria-hidden />
          {ENGINEERING_NOTE}
        </span>
      }
      className={className}
    >
      <div>
        <TrackAge scenario={scenario} />
        {query.isError ? (
          <ProblemNotice
            title="This site wasn’t read"
            {...failureOf(query.error)}
            onRetry={() => query.refetch()}
            className="m-4"
          />
        ) : site ? (
          <SiteBody run={run} site={site} at={{ runId: run.id, runScenarioId: scenario.id }} />
        ) : (
          waits && <DrawerSkeleton />
        )}
      </div>
    </Drawer>
  );
}

/** A track from an advisory: as of when, how old at the run, and whether it has aged since. */
function TrackAge({ scenario: { asOf, ageHoursWhenRun, staleWhenRun, stale } }: { scenario: RunScenario }) {
  if (asOf === null || ageHoursWhenRun === null) return null;
  return (
    <p className="border-b border-rule bg-event-tint px-4 py-2 text-13 text-event">
      Track as of {utc(asOf)}, {ageWords(ageHoursWhenRun)} old when run{staleWhenRun && ', stale'}.
      {stale && ` Now ${ageWords(stale.ageHours)} old${staleWhenRun ? '' : ': stale'}.`}
    </p>
  );
}

function DrawerSkeleton() {
  return (
    <div className="flex flex-col gap-4 p-4" aria-hidden>
      <Skeleton width="70%" />
      <Skeleton className="h-16" />
      <Skeleton className="h-64" />
      <Skeleton className="h-40" />
    </div>
  );
}

interface SiteProps {
  run: Run;
  site: SiteDetail;
  at: ResultAddress;
}

function SiteBody({ run, site, at }: SiteProps) {
  const { gust, label } = useUnits();
  const building = buildingText(site);
  return (
    <>
      <div className="flex flex-wrap items-center gap-x-2.5 gap-y-1 px-4 pt-3 pb-2.5 text-13 text-ink-2">
        <Chip tone={site.state === 'ready' ? 'done' : 'info'}>{site.state === 'ready' ? 'Ready' : 'With notes'}</Chip>
        <span>{building}</span>
        {site.assumed.length > 0 && <span className="text-caution">We assumed {site.assumed.join(', ')}.</span>}
      </div>
      {site.reach !== 'scored' ? (
        <p className="border-t border-rule px-4 py-6">
          {site.reach === 'out_of_reach'
            ? 'Out of reach: more than 1,000 km from the track throughout, so not scored and not charged.'
            : `Below the floor: the gust stays under ${gust(20)} ${label} throughout the storm, so there is no loss.`}
        </p>
      ) : (
        <ScoredSite run={run} site={site} at={at} />
      )}
    </>
  );
}

function ScoredSite({ run, site, at }: SiteProps) {
  const { gust, label } = useUnits();
  const vortices = site.p5Ms !== null && site.p50Ms !== null && site.p95Ms !== null;
  const plainMs = site.plainMs ?? 0;
  const spread = vortices ? { p5: site.p5Ms!, p50: site.p50Ms!, p95: site.p95Ms! } : null;
  const place = `${site.distanceToTrackKm === null ? '' : `${decimal(site.distanceToTrackKm, 0)} km ${site.sideOfTrack ?? 'from'} of the track; `}${
    site.secondsAbove25 === null ? '' : `above ${gust(25)} ${label} for ${decimal(site.secondsAbove25 / 3600, 1)} h`
  }`;
  return (
    <>
      <ThreeRanges run={run} site={site} vortices={vortices} />
      <div className="flex flex-col gap-5 px-4 pt-3.5 pb-5">
        <GustLadder
          rungs={ladderRungs(site)}
          plainMs={plainMs}
          enhanced={spread}
          vortices={
            spread
              ? `${site.wavenumber === null ? '' : `${site.wavenumber} on the ring, `}264 draws`
              : noRangeReason(run.options.mesovortices)
          }
          aside={site.peakTime ? `at the plain peak, ${utc(site.peakTime)}` : 'at the plain peak'}
          fileName={`${site.siteRef}-why-this-gust`}
        />
        {site.series.time.length > 1 && (
          <TimeSeries
            series={site.series}
            peak={{
              timeMs: Date.parse(site.peakTime ?? site.series.time[0]!),
              plainMs,
              range: spread ? { low: spread.p5, high: spread.p95 } : null,
              directionDeg: site.directionDeg,
            }}
            fileName={`${site.siteRef}-gust-through-the-storm`}
          />
        )}
        {place && <p className="text-13 text-ink-2">{place}</p>}
        <CurveAndTerms run={run} site={site} vortices={vortices} />
        <Ground site={site} />
        <TerrainEffects effects={site.terrainEffects} />
        <section aria-label="What drives it">
          <h3 className="text-15">What drives it</h3>
          <Drivers key={site.siteNo} at={at} siteNo={site.siteNo} />
        </section>
      </div>
    </>
  );
}

function ThreeRanges({ run, site, vortices }: { run: Run; site: SiteDetail; vortices: boolean }) {
  const { gust, gustRange, label } = useUnits();
  const { currency } = run;
  const none = noRangeReason(run.options.mesovortices);
  const gross =
    vortices && site.grossP5Minor !== null && site.grossP95Minor !== null
      ? moneyRangeParts(site.grossP5Minor, site.grossP95Minor, currency)
      : null;
  const facts = [
    {
      label: vortices ? 'Peak 3-s gust, enhanced' : 'Peak 3-s gust, plain',
      value: (
        <>
          {vortices ? gustRange(site.p5Ms!, site.p95Ms!) : gust(site.plainMs ?? 0)}{' '}
          <span className="text-13">{label}</span>
        </>
      ),
      note: vortices ? `central ${gust(site.p50Ms!)}, plain ${gust(site.plainMs ?? 0)}` : none,
    },
    {
      label: 'Damage ratio',
      value:
        vortices && site.damageP5 !== null && site.damageP95 !== null
          ? range(decimal(site.damageP5 * 100, 1), percent(site.damageP95))
          : percent(site.damagePlain ?? 0),
      note: vortices ? `mean ${percent(site.damageMean ?? 0)}, plain ${percent(site.damagePlain ?? 0)}` : none,
    },
    {
      label: `Gross, of TIV ${shortMoney(site.tivMinor, currency)}`,
      value: gross
        ? `${gross.amount}${gross.scale ? ` ${gross.scale}` : ''}`
        : `plain ${shortMoney(site.grossPlainMinor ?? 0, currency)}`,
      note: gross
        ? `mean ${amount(site.grossMeanMinor, currency)}, plain ${amount(site.grossPlainMinor, currency)}`
        : none,
    },
  ];
  return (
    <dl className="grid grid-cols-3 border-y border-rule bg-panel-2 max-rail:grid-cols-1">
      {facts.map((fact) => (
        <div
          key={fact.label}
          className="min-w-0 border-l border-rule px-4 py-2.5 first:border-l-0 max-rail:border-t max-rail:border-l-0 max-rail:first:border-t-0"
        >
          <dt className="text-12 text-ink-2">{fact.label}</dt>
          <dd className="text-20 font-black tracking-tight">
            {fact.value}
            <span className="block text-12 font-normal tracking-normal text-ink-2">{fact.note}</span>
          </dd>
        </div>
      ))}
    </dl>
  );
}

const amount = (minor: number | null, currency: string) => shortMoney(minor ?? 0, currency).replace(`${currency} `, '');

/** From gust to damage to what the policy pays. */
function CurveAndTerms({ run, site, vortices }: { run: Run; site: SiteDetail; vortices: boolean }) {
  const { currency } = run;
  const rows: [string, string, string][] = [
    ['Damage curve', site.curve, ''],
    [
      'Ground-up',
      vortices ? `mean ${amount(site.groundUpMeanMinor, currency)}` : 'no vortex range',
      `plain ${amount(site.groundUpPlainMinor, currency)}`,
    ],
    ['Deductible', exactMoney(site.deductibleMinor, currency), ''],
    ['Limit', site.limitMinor === null ? 'none' : exactMoney(site.limitMinor, currency), ''],
    [
      'Gross',
      vortices ? `mean ${amount(site.grossMeanMinor, currency)}` : 'no vortex range',
      `plain ${amount(site.grossPlainMinor, currency)}`,
    ],
  ];
  return (
    <section aria-label="Curve and terms">
      <h3 className="text-15">Curve and terms</h3>
      <p className="text-12 text-ink-2">
        Terms are applied across the damage spread, so gross isn’t ground-up less the deductible.
      </p>
      <dl className="mt-1.5 text-13">
        {rows.map(([term, value, plain]) => (
          <div key={term} className="flex items-baseline gap-3 border-t border-rule py-1.5">
            <dt className="w-28 flex-none text-ink-2">{term}</dt>
            <dd className="min-w-0 flex-1">{value}</dd>
            <dd className="text-right text-ink-2">{plain}</dd>
          </div>
        ))}
      </dl>
    </section>
  );
}

/** What the wind blows over before it arrives. */
function Ground({ site }: { site: SiteDetail }) {
  const sectors = fetchRows(site.fetchM);
  const longest = Math.max(1, ...sectors.map(({ km }) => km));
  return (
    <section aria-label="Ground">
      <h3 className="text-15">Ground upwind</h3>
      <p className="text-12 text-ink-2">
        {site.terrain}
        {site.roughnessM === null ? '' : `, roughness ${decimal(site.roughnessM, 3)} m`}. Land the wind has crossed, by
        where it comes from, up to 100 km.
      </p>
      <dl className="mt-2 grid grid-cols-8 gap-1.5 text-center text-12">
        {sectors.map(({ sector, km }) => (
          <div key={sector} className="flex flex-col items-center justify-end">
            <dd className="order-1 text-ink-2">{decimal(km, km < 10 ? 1 : 0)}</dd>
            <span
              aria-hidden
              className="order-2 w-full rounded-t-1 bg-rule-strong"
              style={{ height: 2 + (30 * km) / longest }}
            />
            <dt className="order-3 font-bold">{sector}</dt>
          </div>
        ))}
      </dl>
      <p className="mt-1 text-12 text-ink-2">km; location quality: {site.locationQuality.replaceAll('_', ' ')}</p>
    </section>
  );
}
