import { Hand } from 'lucide-react';
import type { Run, RunScenario } from '#contract/runs.ts';
import { classNames } from '../../../lib/class-names.ts';
import { shortMoney } from '../../../lib/money.ts';
import { count, counted, percent } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { GustHistogram } from '../../../ui/charts/gust-histogram.tsx';
import { sitesAboveText } from '../result-words.ts';
import { Drivers } from './drivers.tsx';
import { HeadlineCard } from './headline-card.tsx';
import { ResultMap } from './result-map.tsx';
import { TracksCard } from './tracks-card.tsx';

interface OverviewProps {
  run: Run;
  scenario: RunScenario;
  onChooseSite: (siteNo: number) => void;
}

/** How bad and how sure: losses left, footprint and facts right. */
export function Overview({ run, scenario, onChooseSite }: OverviewProps) {
  const result = scenario.result!;
  return (
    <div className="grid grid-cols-[minmax(0,472px)_minmax(0,1fr)] gap-4 max-wide:grid-cols-1">
      <div className="flex min-w-0 flex-col gap-3.5">
        <HeadlineCard run={run} scenario={scenario} />
        {run.scenarios.length > 1 && <TracksCard run={run} chosen={scenario} />}
        <Card>
          <GustHistogram
            enhanced={result.histogram.p50}
            plain={result.histogram.plain}
            thresholdsMs={run.options.gustThresholdsMs}
            vortices={result.gross !== null}
            fileName={`${run.number}-sites-by-gust`}
          />
        </Card>
        <Card title="What drives it" aside="eyewall ring">
          <Drivers key={scenario.id} at={{ runId: run.id, runScenarioId: scenario.id }} />
        </Card>
      </div>
      <div className="flex min-w-0 flex-col gap-3.5">
        <ResultMap
          run={run}
          scenario={scenario}
          chosenSiteNo={null}
          onChooseSite={onChooseSite}
          fullSize={{ to: paths.run(run.id, { tab: 'map', scenario: scenario.id }), isFull: false }}
          className="h-135 max-wide:h-110 max-rail:h-80"
        />
        <Facts run={run} scenario={scenario} />
        <p className="text-12 leading-snug text-ink-2">
          <b>Not modelled:</b> surge, flood, rain through intact openings, tornado outbreaks, demand surge, adjustment
          cost, questions of coverage. The range is the spread of one effect, not a prediction interval.
        </p>
      </div>
    </div>
  );
}

/** Scored, held, assumed, and sites above the chosen gusts. */
function Facts({ run, scenario }: { run: Run; scenario: RunScenario }) {
  const { gust, label } = useUnits();
  const result = scenario.result!;
  const { held } = run.reconciliation;
  const { currency } = run;
  const scoredTiv = run.reconciliation.ready.tivMinor + run.reconciliation.notes.tivMinor;
  const vortices = result.gross !== null;
  const highest = result.above.at(-1);
  const lower = result.above.length > 1 ? result.above[0] : undefined;
  const threshold = ({ gustMs }: { gustMs: number }) => gust(gustMs).replace(/\.0$/, '');
  const facts = [
    {
      label: 'Scored',
      value: counted(result.sitesScored, 'site'),
      note: `TIV ${shortMoney(result.tivMinor, currency)}${result.outOfReach > 0 ? `; ${count(result.outOfReach)} out of reach` : ''}`,
    },
    {
      label: (
        <span className="flex items-center gap-1.25 font-bold text-caution">
          <Hand size={14} strokeWidth={1.75} aria-hidden /> Held, not scored
        </span>
      ),
      value: counted(held.rows, 'site'),
      note: `TIV ${shortMoney(held.tivMinor, currency)}`,
    },
    {
      label: 'Rests on assumptions',
      value: `${percent(scoredTiv > 0 ? run.assumedTivMinor / scoredTiv : 0, 0)} of TIV`,
      note: counted(run.assumedSites, 'site'),
    },
    ...(highest
      ? [
          {
            label: `Gust above ${threshold(highest)} ${label}`,
            value: `${sitesAboveText(highest, vortices)} sites`,
            note: `${vortices ? `central ${count(highest.p50)}, TIV` : 'plain, TIV'} ${shortMoney(highest.tivMinor, currency)}${
              lower ? `; above ${threshold(lower)}: ${sitesAboveText(lower, vortices)}` : ''
            }`,
          },
        ]
      : []),
  ];
  return (
    <dl
      aria-label="Facts of this track"
      className="grid grid-cols-4 overflow-hidden rounded-3 border border-rule bg-sheet shadow-1 max-md:grid-cols-2"
    >
      {facts.map((fact, index) => (
        <div
          key={index}
          className={classNames(
            'min-w-0 border-rule px-4 py-2.5 max-md:border-b',
            index > 0 && 'border-l max-md:border-l-0 max-md:odd:border-l-0 max-md:even:border-l',
          )}
        >
          <dt className="text-12 text-ink-2">{fact.label}</dt>
          <dd className="text-18 font-black tracking-tight">
            {fact.value}
            <span className="block text-12 font-normal tracking-normal text-ink-2">{fact.note}</span>
          </dd>
        </div>
      ))}
    </dl>
  );
}
