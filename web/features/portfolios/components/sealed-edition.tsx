import { useSearchParams } from 'react-router-dom';
import type { Edition } from '#contract/portfolios.ts';
import { EquationCard } from './equation-card.tsx';
import { isFilter, SitesPanel } from './sites-panel.tsx';

/** The rows of an edition with the equation above them; the shown state lives in the address. */
export function SealedEdition({ edition }: { edition: Edition }) {
  const [search, setSearch] = useSearchParams();
  const wanted = search.get('rows');
  return (
    <div className="flex flex-col gap-3.5 wide:min-h-0 wide:flex-1">
      {edition.reconciliation && (
        <EquationCard
          reconciliation={edition.reconciliation}
          currency={edition.currency}
          control={edition.control}
          className="flex-none"
        />
      )}
      <SitesPanel
        edition={edition}
        filter={isFilter(wanted) ? wanted : 'all'}
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
    </div>
  );
}
