/** Every URL of the client; nobody writes one by hand. */
const withQuery = (path: string, query: Record<string, string | readonly string[] | undefined>) => {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query))
    for (const one of value === undefined ? [] : [value].flat()) search.append(key, one);
  return search.size === 0 ? path : `${path}?${search.toString()}`;
};

export type IntakeStep = 'columns' | 'checks' | 'readiness' | 'sites';
export type ScenarioTab = 'track' | 'variants' | 'settings' | 'wind-field';
/** What a view of a scenario shows; `set` names each setting that isn’t the default, as "key.value". */
export interface ScenarioView {
  tab?: ScenarioTab;
  set?: readonly string[];
  edition?: string;
  time?: string;
}
export type RunTab = 'overview' | 'sites' | 'map' | 'slip';

export const paths = {
  home: () => '/',
  signIn: (next?: string) => withQuery('/sign-in', { next }),
  accept: (next?: string) => withQuery('/accept', { next }),
  portfolios: () => '/portfolios',
  uploadSchedule: () => withQuery('/portfolios', { upload: 'new' }),
  portfolio: (portfolioId: string) => `/portfolios/${portfolioId}`,
  edition: (editionId: string, step?: IntakeStep) => withQuery(`/editions/${editionId}`, { step }),
  scenarios: () => '/scenarios',
  newScenario: () => '/scenarios/new',
  scenario: (scenarioId: string, view: ScenarioView = {}) => withQuery(`/scenarios/${scenarioId}`, { ...view }),
  runs: () => '/runs',
  newRun: (from: { edition?: string; scenario?: string; quote?: string } = {}) => withQuery('/runs/new', from),
  run: (runId: string, view: { tab?: RunTab; scenario?: string; site?: string } = {}) =>
    withQuery(`/runs/${runId}`, view),
  billing: () => '/billing',
  validation: () => '/validation',
  ringBench: () => '/ring-bench',
  limits: () => '/limits',
};
