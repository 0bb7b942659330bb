import { useMemo, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import type { Edition } from '#contract/portfolios.ts';
import { ApiError } from '../../../api/api-error.ts';
import { shortMoney } from '../../../lib/money.ts';
import { Card } from '../../../ui/card.tsx';
import { SiteShapes } from '../../../ui/map/map-legend.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { sitePointsQuery } from '../edition-queries.ts';
import { sitesOf } from '../map-sites.ts';
import { EquationCard } from './equation-card.tsx';
import { PlaceMap } from './place-map.tsx';
import { isFilter, SitesPanel } from './sites-panel.tsx';

/** The rows of an edition in a table and on a map; the shown state lives in the address. */
export function SealedEdition({ edition }: { edition: Edition }) {
  const [search, setSearch] = useSearchParams();
  const [chosenRef, setChosenRef] = useState<string | null>(null);
  const points = useQuery(sitePointsQuery(edition.id));
  const sites = useMemo(() => points.data && sitesOf(points.data), [points.data]);
  const wanted = search.get('rows');
  const chosen = sites && chosenRef !== null ? sites.ref.indexOf(chosenRef) : -1;
  return (
    <div className="flex flex-col gap-3.5 wide:min-h-0 wide:flex-1">
      {edition.reconciliation && (
        <EquationCard
          reconciliation={edition.reconciliation}
          currency={edition.currency}
          control={edition}
          className="flex-none"
        />
      )}
      <div className="grid gap-3.5 wide:min-h-0 wide:flex-1 wide:grid-cols-[minmax(0,1fr)_minmax(0,0.62fr)]">
        <SitesPanel
          edition={edition}
          filter={isFilter(wanted) ? wanted : 'all'}
          chosenRef={chosenRef}
          onChoose={setChosenRef}
          onFilter={(filter) =>
            setSearch(
              (before) => {
                const after = new URLSearchParams(before);
                if (filter === 'all') after.delete('rows');
                else after.set('rows', filter);
                return after;
              },
              { replace: true, preventScrollReset: true },
            )
          }
        />
        <Card
          padded={false}
          className="flex min-h-75 flex-col overflow-hidden max-wide:-order-1 max-wide:h-110 max-rail:h-75"
        >
          {points.isError ? (
            <ProblemNotice
              title="The map’s points weren’t read"
              detail={points.error.message}
              requestId={points.error instanceof ApiError ? points.error.requestId : ''}
              onRetry={() => points.refetch()}
              className="m-4"
            />
          ) : sites && sites.siteNo.length === 0 ? (
            <p className="p-4 text-ink-2">No row has coordinates, so there is nothing to draw.</p>
          ) : (
            sites && (
              <PlaceMap
                label="Sites of this edition"
                sites={sites}
                chosen={chosen === -1 ? null : chosen}
                onChoose={(index) => setChosenRef(sites.ref[index] ?? null)}
                describe={(index) =>
                  `${sites.ref[index] ?? ''}: ${shortMoney(sites.tivMinor[index] ?? 0, edition.currency)}`
                }
                legend={<SiteShapes held={sites.state.includes('held')} />}
                className="flex-1"
              />
            )
          )}
        </Card>
      </div>
    </div>
  );
}
