import { useNavigate } from 'react-router-dom';
import type { Run, RunScenario } from '#contract/runs.ts';
import { ageWords } from '#contract/track-age.ts';

import { millions, millionsRange } from '../../../lib/money.ts';
import { countInWords } from '../../../lib/numbers.ts';
import { classNames } from '../../../lib/class-names.ts';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { linearAxis } from '../../../ui/charts/axis.ts';
import { RangeBar } from '../../../ui/charts/range-bar.tsx';

/** Every track of the run on one zero-based axis; a row chooses what the rest of the page shows. */
export function TracksCard({ run, chosen }: { run: Run; chosen: RunScenario }) {
  const navigate = useNavigate();
  const { currency } = run;
  const done = run.scenarios.filter(({ result }) => result !== null);
  const axis = linearAxis(
    0,
    Math.max(1, ...done.flatMap(({ result }) => [result!.grossPlainMinor, result!.gross?.p95 ?? 0])),
    5,
  );
  return (
    <Card
      title={`${countInWords(run.scenarios.length)} tracks`}
      aside={`gross, ${currency} million, ${done.some(({ result }) => result?.gross) ? '5–95 %' : 'plain'}`}
      padded={false}
      className="overflow-hidden"
    >
      <ul className="mt-2">
        {run.scenarios.map((scenario) => (
          <li key={scenario.id} className="border-t border-rule">
            <button
              type="button"
              aria-pressed={scenario.id === chosen.id}
              onClick={() =>
                void navigate(paths.run(run.id, { scenario: scenario.id }), { preventScrollReset: true, replace: true })
              }
              className={classNames(
                'grid w-full grid-cols-[minmax(0,9.5rem)_1fr_6.5rem] items-center gap-3 px-4.5 py-1.5 text-left',
                scenario.id === chosen.id ? 'bg-selected shadow-[inset_3px_0_var(--action)]' : 'hover:bg-hover',
              )}
            >
              <span className="min-w-0">
                <span className={classNames('block truncate', scenario.id === chosen.id && 'font-bold')}>
                  {scenario.name}
                </span>
                {scenario.stale && (
                  <span className="block text-12 text-event">stale, {ageWords(scenario.stale.ageHours)} old</span>
                )}
              </span>
              {scenario.result ? (
                <>
                  <RangeBar
                    axis={axis}
                    enhanced={scenario.result.gross}
                    plain={scenario.result.grossPlainMinor}
                    stale={scenario.stale !== null}
                    format={(minor) => `${millions(minor, currency)} million`}
                  />
                  <b className="text-right">
                    {scenario.result.gross
                      ? millionsRange(scenario.result.gross.p5, scenario.result.gross.p95, currency)
                      : scenario.result.grossPlainMinor === 0
                        ? 'no loss'
                        : `plain ${millions(scenario.result.grossPlainMinor, currency)}`}
                  </b>
                </>
              ) : (
                <span className="col-span-2 text-13 text-ink-2">
                  {scenario.state === 'failed'
                    ? 'failed on our side, free'
                    : scenario.state === 'cancelled'
                      ? 'cancelled'
                      : 'not yet'}
                </span>
              )}
            </button>
          </li>
        ))}
      </ul>
    </Card>
  );
}
