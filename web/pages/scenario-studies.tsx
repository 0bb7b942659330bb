import { useMemo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import type { ChainSettings } from '#contract/studies.ts';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import { failureOf } from '../api/failure.ts';
import { editionChoicesQuery } from '../features/runs/run-queries.ts';
import { editionChoices } from '../features/runs/run-setup.ts';
import { readSettings, writeSettings } from '../features/studies/chain-settings.ts';
import { SourceEvidence } from '../features/studies/components/source-evidence.tsx';
import { SpreadTab } from '../features/studies/components/spread-tab.tsx';
import { WindFieldTab } from '../features/studies/components/wind-field-tab.tsx';
import { validationQuery } from '../features/validation/validation-queries.ts';
import { useDelayed } from '../lib/use-delayed.ts';
import { ProblemNotice } from '../ui/problem.tsx';
import { Skeleton } from '../ui/skeleton.tsx';

/** What the address holds of a study, and how to change it without leaving the page. */
const useStudyAddress = () => {
  const [search, setSearch] = useSearchParams();
  const set = search.getAll('set');
  const address = set.join(' ');
  const settings = useMemo(() => readSettings(address === '' ? [] : address.split(' ')), [address]);
  const change = (alter: (after: URLSearchParams) => void) =>
    setSearch(
      (before) => {
        const after = new URLSearchParams(before);
        alter(after);
        return after;
      },
      { replace: true, preventScrollReset: true },
    );
  return {
    search,
    settings,
    put: (name: string, value: string) => change((after) => after.set(name, value)),
    putSettings: (next: ChainSettings) =>
      change((after) => {
        after.delete('set');
        for (const one of writeSettings(next)) after.append('set', one);
      }),
  };
};

export function SettingsView({ version }: { version: ScenarioVersion }) {
  const { search, settings, put, putSettings } = useStudyAddress();
  const portfolios = useQuery(editionChoicesQuery());
  const { data: validation } = useQuery(validationQuery());
  const waits = useDelayed(portfolios.isPending);
  const editions = useMemo(
    () =>
      editionChoices(portfolios.data?.items ?? []).map((edition) => ({
        editionId: edition.editionId,
        name: `${edition.portfolioName}, edition ${edition.number}`,
        sites: edition.toScore,
      })),
    [portfolios.data],
  );
  if (portfolios.isError)
    return (
      <ProblemNotice
        title="The editions weren’t read"
        {...failureOf(portfolios.error)}
        onRetry={() => portfolios.refetch()}
      />
    );
  if (portfolios.isPending) return waits && <Skeleton width="40%" />;
  const wished = editions.find(({ editionId }) => editionId === search.get('edition'));
  const only = editions.length === 1 ? editions[0] : undefined;
  return (
    <SpreadTab
      scenario={version}
      editions={editions}
      editionId={(wished ?? only)?.editionId ?? null}
      onEdition={(editionId) => put('edition', editionId)}
      settings={settings}
      onSettings={putSettings}
      evidence={validation && <SourceEvidence validation={validation} />}
    />
  );
}

export function WindFieldView({ version }: { version: ScenarioVersion }) {
  const { search, settings, put, putSettings } = useStudyAddress();
  return (
    <WindFieldTab
      key={version.id}
      version={version}
      time={search.get('time')}
      onTime={(time) => put('time', time)}
      settings={settings}
      onSettings={putSettings}
    />
  );
}
