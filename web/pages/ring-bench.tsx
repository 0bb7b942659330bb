import { useCallback, useEffect, useId, useMemo, useState } from 'react';
import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { Copy, FlaskConical, Save, Send } from 'lucide-react';
import { useSearchParams } from 'react-router-dom';
import { UNDERWRITERS } from '#contract/roles.ts';
import { failureOf } from '../api/failure.ts';
import { BreakdownMeasures, BreakdownWind } from '../features/rings/components/breakdown-charts.tsx';
import { ExportCard } from '../features/rings/components/export-card.tsx';
import { FactsStrip } from '../features/rings/components/facts-strip.tsx';
import { GrowthBars } from '../features/rings/components/growth-bars.tsx';
import { GustEstimate } from '../features/rings/components/gust-estimate.tsx';
import { LockPanel } from '../features/rings/components/lock-panel.tsx';
import { RingControls } from '../features/rings/components/ring-controls.tsx';
import { RingProfile } from '../features/rings/components/ring-profile.tsx';
import { SaveToScenario, SendToDraft } from '../features/rings/components/save-dialogs.tsx';
import { StabilityPicture } from '../features/rings/components/stability-picture.tsx';
import { VorticityCard } from '../features/rings/components/vorticity-card.tsx';
import { orderOf } from '../features/rings/film.ts';
import { RING_NOTE } from '../features/rings/film-files.ts';
import { calibrationsQuery, ringQuery, stabilityMapQuery } from '../features/rings/ring-queries.ts';
import { readStudy, writeStudy, type RingStudy } from '../features/rings/ring-study.ts';
import { useFilm } from '../features/rings/use-film.ts';
import { scenariosQuery } from '../features/scenarios/scenario-queries.ts';
import { requireOneOf } from '../features/session/guard.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { useDelayed } from '../lib/use-delayed.ts';
import { useSettled } from '../lib/use-settled.ts';
import { Button } from '../ui/button.tsx';
import { Chip } from '../ui/chip.tsx';
import { Page } from '../ui/page.tsx';
import { ProblemNotice } from '../ui/problem.tsx';
import { Skeleton } from '../ui/skeleton.tsx';
import { useToast } from '../ui/toast.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async () => {
  await requireOneOf(UNDERWRITERS, 'Underwriters and modelers can open the ring bench.');
  return null;
};

const SETTLE_MS = 250;
type Dialog = 'scenario' | 'draft' | null;

export function Component() {
  const session = useSession();
  const isModeler = holdsOneOf(session, ['modeler']);
  const [search, setSearch] = useSearchParams();
  const [study, setStudy] = useState<RingStudy>(() => readStudy(search));
  const change = useCallback((part: Partial<RingStudy>) => setStudy((before) => ({ ...before, ...part })), []);
  const settled = useSettled(study, SETTLE_MS);
  const [dialog, setDialog] = useState<Dialog>(null);
  const [index, setIndex] = useState(0);
  const canvasId = useId();
  const toast = useToast();

  useEffect(() => {
    setSearch(
      (before) => {
        const after = new URLSearchParams(before);
        writeStudy(settled, after);
        return after;
      },
      { replace: true, preventScrollReset: true },
    );
  }, [settled, setSearch]);

  const orderText = JSON.stringify(orderOf(settled));
  const order = useMemo(() => JSON.parse(orderText) as ReturnType<typeof orderOf>, [orderText]);
  const film = useFilm(order);
  const shown = Math.min(index, Math.max(0, film.frames.length - 1));
  const ring = useQuery(ringQuery(settled));
  const map = useQuery(stabilityMapQuery());
  const calibrations = useQuery(calibrationsQuery());
  const scenarios = useInfiniteQuery({ ...scenariosQuery(), enabled: dialog === 'scenario' });
  const waits = useDelayed(ring.isPending);
  const signed = calibrations.data?.items.filter(({ state }) => state === 'signed');
  const base = signed?.[0] ?? calibrations.data?.items[0];
  const isOld = ring.isPlaceholderData || settled !== study;

  const copy = async () => {
    const after = new URLSearchParams(search);
    writeStudy(study, after);
    const address = `${location.origin}${location.pathname}?${after.toString()}`;
    try {
      await navigator.clipboard.writeText(address);
      toast({ text: 'The study’s address is copied.' });
    } catch {
      toast({ text: 'The browser didn’t allow copying. The address bar holds the study.' });
    }
  };

  return (
    <Page
      title="Ring bench"
      crumbs={[{ label: 'Ring bench' }]}
      note={RING_NOTE}
      sub={
        <>
          <Chip tone="idle" icon={FlaskConical}>
            Study, kept in the address
          </Chip>
          <span>Nothing here changes a scenario or a calibration until you save it there</span>
        </>
      }
      actions={
        <>
          <Button icon={Copy} onClick={() => void copy()}>
            Copy study
          </Button>
          <Button icon={Save} onClick={() => setDialog('scenario')}>
            Save to scenario…
          </Button>
          <Button
            variant="filled"
            icon={Send}
            disabledReason={
              !isModeler
                ? 'modelers draft calibrations'
                : base || calibrations.isPending
                  ? undefined
                  : 'no calibration yet'
            }
            onClick={() => base && setDialog('draft')}
          >
            Send to {base?.code ?? 'calibration'} draft
          </Button>
        </>
      }
    >
      <div className="flex flex-col gap-3.5">
        {ring.isError && (
          <ProblemNotice title="The ring wasn’t worked out" {...failureOf(ring.error)} onRetry={() => ring.refetch()} />
        )}
        {ring.data ? <FactsStrip ring={ring.data} isOld={isOld} /> : waits && <Skeleton width="100%" />}
        <div className="grid grid-cols-[16.375rem_minmax(0,1fr)_26.25rem] items-start gap-3.5 max-xl:grid-cols-[16.375rem_minmax(0,1fr)] max-md:grid-cols-1">
          <div className="max-md:order-2">
            <RingControls study={study} onChange={change} />
          </div>
          <div className="flex min-w-0 flex-col gap-3.5 max-md:contents">
            <div className="min-w-0 max-md:order-1">
              <VorticityCard
                study={study}
                onChange={change}
                frames={film.frames}
                phase={film.phase}
                fault={film.fault}
                onStart={film.start}
                onCancel={film.cancel}
                index={shown}
                onIndex={setIndex}
                canvasId={canvasId}
              />
            </div>
            <div className="min-w-0 max-md:order-3">
              <BreakdownWind frames={film.frames} index={shown} hours={settled.hours} />
            </div>
          </div>
          <div className="flex min-w-0 flex-col gap-3.5 max-xl:col-span-full max-md:order-4">
            {ring.data && <GrowthBars ring={ring.data} />}
            {map.data && <StabilityPicture map={map.data} width={study.width} eye={study.eye} onPick={change} />}
            {map.isError && (
              <ProblemNotice
                title="The stability map wasn’t read"
                {...failureOf(map.error)}
                onRetry={() => map.refetch()}
              />
            )}
          </div>
        </div>
        <BreakdownMeasures frames={film.frames} index={shown} hours={settled.hours} />
        {ring.data && (
          <div className="grid grid-cols-3 items-start gap-3.5 max-xl:grid-cols-2 max-md:grid-cols-1">
            <LockPanel ring={ring.data} />
            <RingProfile ring={ring.data} radiusKm={settled.radiusKm} />
            <GustEstimate ring={ring.data} study={settled} />
          </div>
        )}
        <ExportCard order={order} frames={film.frames} index={shown} canvasId={canvasId} />
      </div>
      {dialog === 'scenario' && !scenarios.isPending && (
        <SaveToScenario
          ring={study}
          scenarios={(scenarios.data?.pages ?? []).flatMap(({ items }) => items)}
          onClose={() => setDialog(null)}
        />
      )}
      {dialog === 'draft' && base && <SendToDraft ring={study} base={base} onClose={() => setDialog(null)} />}
    </Page>
  );
}
