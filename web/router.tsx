import { createBrowserRouter } from 'react-router-dom';
import { SIGNED_IN_ROUTE } from './features/session/session-queries.ts';
import { BareError } from './pages/bare-error.tsx';
import { Starting } from './pages/starting.tsx';

/** Pages load when first visited; each exports loader, Component and ErrorBoundary. */
export const router = createBrowserRouter([
  {
    HydrateFallback: Starting,
    ErrorBoundary: BareError,
    children: [
      { path: 'sign-in', lazy: () => import('./pages/sign-in.tsx') },
      { path: 'accept', lazy: () => import('./pages/first-acceptance.tsx') },
      {
        id: SIGNED_IN_ROUTE,
        lazy: () => import('./pages/app-shell.tsx'),
        children: [
          { index: true, lazy: () => import('./pages/home.tsx') },
          { path: 'portfolios', lazy: () => import('./pages/portfolios.tsx') },
          { path: 'portfolios/:portfolioId', lazy: () => import('./pages/portfolio.tsx') },
          { path: 'editions/:editionId', lazy: () => import('./pages/edition.tsx') },
          { path: 'scenarios', lazy: () => import('./pages/scenarios.tsx') },
          { path: 'scenarios/new', lazy: () => import('./pages/new-scenario.tsx') },
          { path: 'scenarios/:scenarioId', lazy: () => import('./pages/scenario.tsx') },
          { path: 'runs', lazy: () => import('./pages/runs.tsx') },
          { path: 'runs/new', lazy: () => import('./pages/new-run.tsx') },
          { path: 'runs/:runId', lazy: () => import('./pages/run.tsx') },
          { path: 'billing', lazy: () => import('./pages/billing.tsx') },
          { path: 'ring-bench', lazy: () => import('./pages/ring-bench.tsx') },
          { path: 'validation', lazy: () => import('./pages/validation.tsx') },
          { path: 'limits', lazy: () => import('./pages/limits.tsx') },
          { path: '*', lazy: () => import('./pages/not-found.tsx') },
        ],
      },
    ],
  },
]);
