import { useEffect, useRef, useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { BookOpenText, ChartScatter, Home, Layers, Orbit, Play, ReceiptText, Route } from 'lucide-react';
import { Outlet, useLocation, useNavigate } from 'react-router-dom';
import { MONEY_READERS, READERS } from '#contract/roles.ts';
import type { Session } from '#contract/session.ts';
import { whenSignedOut } from '../api/call.ts';
import { recentRunsQuery } from '../features/home/home-queries.ts';
import { requireSession } from '../features/session/guard.ts';
import { holdsOneOf, useSession, useSignOut } from '../features/session/session-queries.ts';
import { UnitsProvider } from '../lib/units.tsx';
import { paths } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Frame } from '../ui/frame/frame.tsx';
import type { NavigationItem } from '../ui/frame/navigation.ts';
import { ToastProvider } from '../ui/toast.tsx';

export { BareError as ErrorBoundary } from './bare-error.tsx';
export const loader = requireSession;

const ROLE_NAMES = { underwriter: 'Underwriter', modeler: 'Modeler', admin: 'Account admin', auditor: 'Auditor' };
const roleText = (session: Session) =>
  [...session.roles.map((role) => ROLE_NAMES[role]), ...(session.isApprover ? ['approver'] : [])].join(', ');
/** An auditor sees all and changes nothing, unless another role lets them. */
const isOnlyAuditor = (session: Session) => session.roles.every((role) => role === 'auditor');

const workItems = (session: Session): NavigationItem[] => {
  const seesSites = holdsOneOf(session, READERS);
  return [
    { to: paths.home(), label: 'Home', icon: Home, exact: true },
    ...(seesSites
      ? [
          { to: paths.portfolios(), label: 'Portfolios', icon: Layers, alsoUnder: ['/editions'] },
          { to: paths.scenarios(), label: 'Scenarios', icon: Route },
        ]
      : []),
    { to: paths.runs(), label: 'Runs', icon: Play },
  ];
};
/** What the numbers rest on, for those who own or check the model. */
const modelItems = (session: Session): NavigationItem[] =>
  holdsOneOf(session, ['modeler', 'auditor'])
    ? [
        ...(holdsOneOf(session, ['modeler']) ? [{ to: paths.ringBench(), label: 'Ring bench', icon: Orbit }] : []),
        { to: paths.validation(), label: 'Validation', icon: ChartScatter },
      ]
    : [];
const accountItems = (session: Session): NavigationItem[] => [
  ...(holdsOneOf(session, MONEY_READERS) ? [{ to: paths.billing(), label: 'Billing', icon: ReceiptText }] : []),
  { to: paths.limits(), label: 'Limits of use', icon: BookOpenText },
];

export function Component() {
  const session = useSession();
  const navigate = useNavigate();
  const location = useLocation();
  const signOut = useSignOut();
  const { data: runs } = useQuery(recentRunsQuery());
  const working = (runs?.items ?? []).filter((run) => run.state === 'waiting' || run.state === 'working');
  const announcement = useFinishedRuns(runs?.items);

  useEffect(
    () =>
      whenSignedOut(() => {
        queryClient.clear();
        void navigate(paths.signIn(`${location.pathname}${location.search}`), { replace: true });
      }),
    [navigate, location],
  );

  return (
    <UnitsProvider key={session.person.id} personId={session.person.id}>
      <ToastProvider>
        <Frame
          organisation={session.organisation}
          person={{ name: session.person.name, role: roleText(session) }}
          work={workItems(session)}
          model={modelItems(session)}
          account={accountItems(session)}
          working={working.map((run) => ({
            id: run.id,
            number: run.number,
            done: run.scenariosDone,
            total: run.scenariosTotal,
            to: paths.run(run.id),
          }))}
          readOnlyChip={isOnlyAuditor(session) ? 'Auditor: read only' : null}
          onSignOut={() => signOut.mutate(undefined, { onSettled: () => void navigate(paths.signIn()) })}
        >
          <Outlet />
        </Frame>
        <p role="status" className="sr-only">
          {announcement}
        </p>
      </ToastProvider>
    </UnitsProvider>
  );
}

/** One polite sentence when a run that was under way has ended; it never takes the focus. */
function useFinishedRuns(runs: readonly { id: string; number: string; state: string }[] | undefined): string {
  const [announcement, setAnnouncement] = useState('');
  const underWay = useRef(new Set<string>());
  useEffect(() => {
    if (!runs) return;
    const ended = runs.filter((run) => underWay.current.has(run.id) && !['waiting', 'working'].includes(run.state));
    underWay.current = new Set(runs.filter((run) => ['waiting', 'working'].includes(run.state)).map((run) => run.id));
    if (ended.length > 0) setAnnouncement(ended.map((run) => `Run ${run.number}: ${run.state}.`).join(' '));
  }, [runs]);
  return announcement;
}
