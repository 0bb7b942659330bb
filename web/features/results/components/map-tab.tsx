import type { Run, RunScenario } from '#contract/runs.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import { GustHistogram } from '../../../ui/charts/gust-histogram.tsx';
import { sitesAboveText } from '../result-words.ts';
import { MaximaLine } from './headline-card.tsx';
import { ResultMap } from './result-map.tsx';
import { SiteDrawer } from './site-drawer.tsx';

interface MapTabProps {
  run: Run;
  scenario: RunScenario;
  chosenSiteNo: number | null;
  onChooseSite: (siteNo: number | null) => void;
}

/** The footprint in full size, with its summary beside it or the chosen site. */
export function MapTab({ run, scenario, chosenSiteNo, onChooseSite }: MapTabProps) {
  const { gust, label } = useUnits();
  const result = scenario.result!;
  const vortices = result.gross !== null;
  return (
    <div className="grid min-h-0 flex-1 grid-cols-[minmax(0,1fr)_auto] gap-4 max-wide:grid-cols-1">
      <ResultMap
        run={run}
        scenario={scenario}
        chosenSiteNo={chosenSiteNo}
        onChooseSite={onChooseSite}
        fullSize={{ to: paths.run(run.id, { scenario: scenario.id }), isFull: true }}
        className="h-full min-h-110 max-wide:h-120 max-rail:h-[60vh] max-rail:min-h-80"
      />
      {chosenSiteNo === null ? (
        <aside
          aria-label="Summary"
          className="flex w-90 min-w-0 flex-col gap-4 overflow-y-auto rounded-3 border border-rule bg-sheet p-4 shadow-1 max-wide:w-full"
        >
          <section>
            <h2 className="text-15">Sites above a gust</h2>
            <dl className="mt-1">
              {result.above.map((above) => (
                <div
                  key={above.gustMs}
                  className="flex items-baseline gap-3 border-t border-rule py-1.5 first:border-t-0"
                >
                  <dt className="flex-1 text-13 text-ink-2">
                    above {gust(above.gustMs).replace(/\.0$/, '')} {label}
                  </dt>
                  <dd className="text-right">
                    <b className="text-16">{sitesAboveText(above, vortices)}</b>
                    <span className="block text-12 text-ink-2">
                      {vortices ? `central ${count(above.p50)}, plain ${count(above.plain)}` : 'plain'}
                    </span>
                  </dd>
                </div>
              ))}
            </dl>
            <p className="mt-1 text-12 text-ink-2">
              {counted(result.sitesScored, 'site')} scored, {counted(result.outOfReach, 'site')} out of reach,{' '}
              {counted(result.belowFloor, 'site')} below {gust(20)} {label} throughout.
            </p>
          </section>
          <GustHistogram
            enhanced={result.histogram.p50}
            plain={result.histogram.plain}
            thresholdsMs={run.options.gustThresholdsMs}
            vortices={vortices}
            fileName={`${run.number}-sites-by-gust`}
          />
          <p className="text-13">
            <MaximaLine scenario={scenario} />
          </p>
          <p className="mt-auto text-12 text-ink-2">
            Not a forecast, a warning or a guide to evacuation or re-entry. For decisions about people, follow the
            national meteorological service and local emergency management.
          </p>
        </aside>
      ) : (
        <SiteDrawer
          run={run}
          scenario={scenario}
          siteNo={chosenSiteNo}
          onPrevious={undefined}
          onNext={undefined}
          onClose={() => onChooseSite(null)}
          className="wide:-mt-4.5 wide:-mr-6 wide:-mb-4.5 wide:w-150"
        />
      )}
    </div>
  );
}
