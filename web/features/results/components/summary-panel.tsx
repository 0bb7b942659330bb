import type { Run, RunScenario } from '#contract/runs.ts';
import { count, counted } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { GustHistogram } from '../../../ui/charts/gust-histogram.tsx';
import { sitesAboveText } from '../result-words.ts';
import { MaximaLine } from './headline-card.tsx';

/** Beside the map: sites above the chosen gusts, sites by gust, and both maxima. */
export function SummaryPanel({ run, scenario }: { run: Run; scenario: RunScenario }) {
  const { gust, label } = useUnits();
  const result = scenario.result!;
  const vortices = result.gross !== null;
  return (
    <>
      <section>
        <h2 className="text-15">Sites above a gust</h2>
        <dl className="mt-1">
          {result.above.map((above) => (
            <div key={above.gustMs} className="flex items-baseline gap-3 border-t border-rule py-1.5 first:border-t-0">
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
    </>
  );
}
