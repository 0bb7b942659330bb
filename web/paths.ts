/** Every URL of the client; nobody writes one by hand. */
const withQuery = (path: string, query: Record<string, string | undefined>) => {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query)) if (value !== undefined) search.set(key, value);
  return search.size === 0 ? path : `${path}?${search.toString()}`;
};

export type IntakeStep = 'columns' | 'checks' | 'readiness' | 'sites';
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
  scenario: (scenarioId: string) => `/scenarios/${scenarioId}`,
  runs: () => '/runs',
  newRun: (from: { edition?: string; scenario?: string; quote?: string } = {}) => withQuery('/runs/new', from),
  run: (runId: string, view: { tab?: RunTab; scenario?: string; site?: string } = {}) =>
    withQuery(`/runs/${runId}`, view),
  billing: () => '/billing',
  limits: () => '/limits',
};
