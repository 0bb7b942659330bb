import { useState } from 'react';
import { Filter, Search } from 'lucide-react';
import type { Run, RunScenario, SiteResult } from '#contract/runs.ts';
import { failureOf } from '../../../api/failure.ts';
import { classNames } from '../../../lib/class-names.ts';
import { shortMoney } from '../../../lib/money.ts';
import { useUnits } from '../../../lib/units.tsx';
import { Button } from '../../../ui/button.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import type { SitesFilter } from '../result-queries.ts';
import { useSitePages } from '../use-site-pages.ts';
import { SiteDrawer } from './site-drawer.tsx';
import { siteCount, SitesTable } from './sites-table.tsx';

interface SitesTabProps {
  run: Run;
  scenario: RunScenario;
  chosenSiteNo: number | null;
  onChooseSite: (siteNo: number | null) => void;
}

const INPUT = 'h-9 rounded-2 border border-edge bg-sheet text-14 pointer-coarse:h-11';

/** Which sites carry it; the drawer says why. */
export function SitesTab({ run, scenario, chosenSiteNo, onChooseSite }: SitesTabProps) {
  const { gust, label, toUnit, fromUnit } = useUnits();
  const [filter, setFilter] = useState<SitesFilter>({ sort: 'gross', direction: 'desc' });
  const [search, setSearch] = useState('');
  const [minGust, setMinGust] = useState<string | null>(null);
  const [chosenIndex, setChosenIndex] = useState<number | null>(null);
  const vortices = scenario.result?.gross != null;
  const { first, rowAt, setRange, failedPage } = useSitePages({ runId: run.id, runScenarioId: scenario.id }, filter);
  const page = first.data;
  const total = page?.total ?? 0;

  const choose = (site: SiteResult, index: number) => {
    setChosenIndex(index);
    onChooseSite(site.siteNo);
  };
  const walk = (by: 1 | -1) => {
    const next = chosenIndex === null ? null : chosenIndex + by;
    const site = next === null ? undefined : rowAt(next);
    return site && next !== null ? () => choose(site, next) : undefined;
  };
  const applyGust = () => {
    if (minGust === null) return;
    const typed = Number(minGust.replace(',', '.'));
    const valid = minGust.trim() !== '' && Number.isFinite(typed) && typed > 0;
    setFilter((before) => ({ ...before, minGustMs: valid ? Math.round(fromUnit(typed) * 1000) / 1000 : undefined }));
    setMinGust(null);
  };

  return (
    <div
      className={classNames(
        'grid min-h-0 flex-1 gap-4 max-wide:grid-cols-1',
        chosenSiteNo === null ? 'grid-cols-1' : 'wide:grid-cols-[minmax(0,1fr)_640px]',
      )}
    >
      <div className="flex min-h-0 min-w-0 flex-col gap-3 max-wide:h-[75vh]">
        <form
          role="search"
          className="flex flex-wrap items-center gap-2"
          onSubmit={(event) => {
            event.preventDefault();
            setFilter((before) => ({ ...before, search: search.trim() || undefined }));
            applyGust();
          }}
        >
          <label className="relative flex items-center">
            <Filter size={15} strokeWidth={1.75} className="absolute left-2.5 text-ink-2" aria-hidden />
            <span className="sr-only">Gust above, {label}</span>
            <input
              inputMode="decimal"
              placeholder="Gust above"
              className={classNames(INPUT, 'w-40 pr-11 pl-8')}
              value={
                minGust ??
                (filter.minGustMs === undefined ? '' : String(Math.round(toUnit(filter.minGustMs) * 10) / 10))
              }
              onChange={(event) => setMinGust(event.target.value)}
              onBlur={applyGust}
            />
            <span className="absolute right-2.5 text-13 text-ink-2" aria-hidden>
              {label}
            </span>
          </label>
          <label className="relative flex items-center">
            <Search size={15} strokeWidth={1.75} className="absolute left-2.5 text-ink-2" aria-hidden />
            <span className="sr-only">Find a site by reference or name</span>
            <input
              type="search"
              placeholder="Reference, name, town"
              className={classNames(INPUT, 'w-52 pr-2 pl-8')}
              value={search}
              onChange={(event) => {
                setSearch(event.target.value);
                if (event.target.value === '') setFilter((before) => ({ ...before, search: undefined }));
              }}
              onBlur={() => setFilter((before) => ({ ...before, search: search.trim() || undefined }))}
            />
          </label>
          {/* Two fields: without a submit button Enter would do nothing. */}
          <button type="submit" className="sr-only">
            Apply the filters
          </button>
          <p className="text-13 text-ink-2" aria-live="polite">
            {page && (
              <>
                {siteCount(total)}, TIV {shortMoney(page.totals.tivMinor, run.currency)}
                {vortices
                  ? `; gross: plain ${shortMoney(page.totals.grossPlainMinor, run.currency)}, enhanced mean ${shortMoney(page.totals.grossMeanMinor, run.currency)}`
                  : `; gross plain ${shortMoney(page.totals.grossPlainMinor, run.currency)}, no vortex range`}
              </>
            )}
          </p>
        </form>
        {first.isError ? (
          <ProblemNotice title="The sites weren’t read" {...failureOf(first.error)} onRetry={() => first.refetch()} />
        ) : page && total === 0 ? (
          <div className="rounded-3 border border-rule bg-sheet px-4 py-8">
            <p>
              {filter.minGustMs !== undefined
                ? `No site above ${gust(filter.minGustMs)} ${label}. Lower the filter${page.largestGustMs === null ? '' : ` (maximum ${gust(page.largestGustMs)})`}.`
                : 'No site fits the search.'}
            </p>
            <Button
              size="small"
              className="mt-3"
              onClick={() => {
                setSearch('');
                setFilter({ sort: filter.sort, direction: filter.direction });
              }}
            >
              Show all sites
            </Button>
          </div>
        ) : (
          <SitesTable
            total={total}
            rowAt={rowAt}
            onRange={setRange}
            filter={filter}
            onSort={(sort, direction) => {
              setFilter((before) => ({ ...before, sort, direction }));
              setChosenIndex(null);
            }}
            currency={run.currency}
            vortices={vortices}
            chosenSiteNo={chosenSiteNo}
            onChoose={choose}
            slim={chosenSiteNo !== null}
            loading={first.isPending}
            failedPage={failedPage}
          />
        )}
        <p className="text-12 text-ink-2">
          Means add up over sites; ranges don’t: the event’s range comes from the draws of the sum.
        </p>
      </div>
      {chosenSiteNo !== null && (
        <SiteDrawer
          run={run}
          scenario={scenario}
          siteNo={chosenSiteNo}
          onPrevious={walk(-1)}
          onNext={walk(1)}
          onClose={() => onChooseSite(null)}
          className="wide:-mt-4.5 wide:-mr-6 wide:-mb-4.5"
        />
      )}
    </div>
  );
}
