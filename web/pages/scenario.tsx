import { useRef, useState } from 'react';
import { useQueryClient, useSuspenseQuery } from '@tanstack/react-query';
import { Pencil, Play, RefreshCw, Save, Undo2 } from 'lucide-react';
import { Link, useParams, useSearchParams, type LoaderFunctionArgs } from 'react-router-dom';
import { conditionedLabel } from '#contract/observed-vortices.ts';
import { TRACK_WRITERS, UNDERWRITERS } from '#contract/roles.ts';
import type { ScenarioVersion } from '#contract/scenarios.ts';
import { derivationWords } from '#contract/variant-words.ts';
import { ApiError } from '../api/api-error.ts';
import { newIdempotencyKey } from '../api/idempotency-key.ts';
import { LeaveGuard } from '../features/scenarios/components/leave-guard.tsx';
import { SaveProblem } from '../features/scenarios/components/save-problem.tsx';
import { TrackEditor } from '../features/scenarios/components/track-editor.tsx';
import { VariantsTab } from '../features/scenarios/components/variants-tab.tsx';
import { scenarioQuery, useSaveVersion } from '../features/scenarios/scenario-queries.ts';
import { draftOf, missingFrom, trackOf } from '../features/scenarios/track-draft.ts';
import { useDraft } from '../features/scenarios/use-draft.ts';
import { SPREAD_NOTE } from '../features/studies/spread-file.ts';
import { holdsOneOf, useSession } from '../features/session/session-queries.ts';
import { utc } from '../lib/dates.ts';
import { counted } from '../lib/numbers.ts';
import { paths, type ScenarioTab } from '../paths.ts';
import { queryClient } from '../query-client.ts';
import { Button, ButtonLink } from '../ui/button.tsx';
import { Chip } from '../ui/chip.tsx';
import { Message } from '../ui/message.tsx';
import { Page } from '../ui/page.tsx';
import { StaleChip } from '../ui/stale-chip.tsx';
import { Tabs } from '../ui/tabs.tsx';

import { SettingsView, WindFieldView } from './scenario-studies.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async ({ params }: LoaderFunctionArgs) => {
  // Always what the service holds now: an edit based on an old version couldn't be saved.
  await queryClient.fetchQuery({ ...scenarioQuery(params.scenarioId!), staleTime: 0 });
  return null;
};

const TABS: readonly { tab: ScenarioTab; label: string }[] = [
  { tab: 'track', label: 'Track' },
  { tab: 'variants', label: 'Variants' },
  { tab: 'settings', label: 'Settings, one at a time' },
  { tab: 'wind-field', label: 'Wind field' },
];

export function Component() {
  const { scenarioId } = useParams();
  const { data: version } = useSuspenseQuery(scenarioQuery(scenarioId!));
  return <Editor key={version.scenarioId} version={version} />;
}

/** Fetched versions never change the draft below the person; saving or loading the newest one does. */
function Editor({ version: fetched }: { version: ScenarioVersion }) {
  const [base, setBase] = useState(fetched);
  const { draft, change, undo, reset, canUndo, isDirty } = useDraft(draftOf(base.track));
  const [sortByTime, setSortByTime] = useState(false);
  const [search] = useSearchParams();
  const session = useSession();
  const canStudy = holdsOneOf(session, UNDERWRITERS);
  const wished = TABS.find((one) => one.tab === search.get('tab'))?.tab;
  const tab = canStudy && wished ? wished : 'track';
  const client = useQueryClient();
  const canWrite = holdsOneOf(session, TRACK_WRITERS);
  const save = useSaveVersion(base.scenarioId);
  const key = useRef(newIdempotencyKey());
  const missing = missingFrom(draft);
  const next = base.number + 1;
  const isConflict = save.error instanceof ApiError && save.error.code === 'conflict';

  const startFrom = (version: ScenarioVersion) => {
    setBase(version);
    reset(draftOf(version.track));
    setSortByTime(false);
    save.reset();
    key.current = newIdempotencyKey();
  };
  const submit = () => {
    const track = trackOf(draft);
    if (!track) return;
    save.mutate(
      { body: { track, basedOn: base.number, sortByTime }, key: key.current },
      { onSuccess: startFrom, onError: () => (key.current = newIdempotencyKey()) },
    );
  };
  const loadNewest = async () => {
    startFrom(await client.fetchQuery({ ...scenarioQuery(base.scenarioId), staleTime: 0 }));
  };

  return (
    <Page
      title={base.name}
      note={tab === 'settings' || tab === 'variants' ? SPREAD_NOTE : undefined}
      crumbs={[{ label: 'Scenarios', to: paths.scenarios() }, { label: base.name }]}
      sub={
        <>
          {isDirty ? (
            <Chip tone="idle" icon={Pencil}>
              Draft of version {next}
            </Chip>
          ) : (
            <Chip tone="done">Version {base.number}, saved</Chip>
          )}
          <span>
            saved by <b>{base.createdBy}</b>, {utc(base.createdAt)}
          </span>
          <span>
            {counted(draft.fixes.length, 'fix', 'fixes')}, {base.resolution.hemisphere}ern hemisphere
          </span>
          {conditionedLabel(draft.vortices) && <span>{conditionedLabel(draft.vortices)}</span>}
          {base.stale && <StaleChip stale={base.stale} what="Stale track" />}
          {base.derivation && (
            <span>
              {derivationWords(base.derivation, base.number)}{' '}
              <Link to={paths.scenario(base.derivation.scenarioId)}>See {base.derivation.name}</Link>
            </span>
          )}
        </>
      }
      actions={
        <>
          {canUndo && (
            <Button variant="quiet" icon={Undo2} onClick={undo}>
              Undo
            </Button>
          )}
          {holdsOneOf(session, UNDERWRITERS) && !isDirty && (
            <ButtonLink icon={Play} to={paths.newRun({ scenario: base.id })} variant={canWrite ? 'outlined' : 'filled'}>
              Use in a run
            </ButtonLink>
          )}
          {canWrite && (tab === 'track' || isDirty) && (
            <Button
              variant="filled"
              icon={Save}
              pending={save.isPending}
              disabledReason={!isDirty ? 'nothing changed yet' : (missing ?? undefined)}
              onClick={submit}
            >
              Save version {next}
            </Button>
          )}
        </>
      }
    >
      <LeaveGuard when={isDirty} what={`${base.name}, version ${next}`} />
      {save.isError && (
        <div className="mb-3.5">
          <SaveProblem
            error={save.error}
            action={
              isConflict && (
                <Button size="small" icon={RefreshCw} onClick={() => void loadNewest()}>
                  Drop my changes, show the newest version
                </Button>
              )
            }
          />
        </div>
      )}
      {canStudy && (
        <Tabs
          label="Views of this scenario"
          tabs={TABS.map((one) => ({
            to: paths.scenario(base.scenarioId, {
              tab: one.tab === 'track' ? undefined : one.tab,
              set: search.getAll('set'),
              edition: search.get('edition') ?? undefined,
              time: search.get('time') ?? undefined,
            }),
            label: one.label,
            current: one.tab === tab,
          }))}
        />
      )}
      {tab !== 'track' && isDirty && (
        <Message tone="caution" className="mb-3.5">
          Your changes to the track aren’t saved yet. What stands here is that of version {base.number}.
        </Message>
      )}
      {tab === 'variants' && <VariantsTab scenario={base} canSave={canWrite} />}
      {tab === 'settings' && <SettingsView version={base} />}
      {tab === 'wind-field' && <WindFieldView version={base} />}
      {tab === 'track' && (
        <TrackEditor
          draft={draft}
          change={change}
          sortByTime={sortByTime}
          onSortByTime={setSortByTime}
          readOnly={!canWrite}
          fileName={`${base.name}-v${base.number}`}
        />
      )}
    </Page>
  );
}
