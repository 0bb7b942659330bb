import { useEffect, useRef, useState } from 'react';
import { ArrowLeft, Save, Undo2 } from 'lucide-react';
import { redirect, useNavigate, type LoaderFunctionArgs } from 'react-router-dom';
import { TRACK_WRITERS } from '#contract/roles.ts';
import type { ReadTrackReply } from '#contract/scenarios.ts';
import { newIdempotencyKey } from '../api/idempotency-key.ts';
import { LeaveGuard } from '../features/scenarios/components/leave-guard.tsx';
import { SaveProblem } from '../features/scenarios/components/save-problem.tsx';
import { TrackEditor } from '../features/scenarios/components/track-editor.tsx';
import { TrackIntake } from '../features/scenarios/components/track-intake.tsx';
import { useCreateScenario } from '../features/scenarios/scenario-queries.ts';
import { emptyFix, missingFrom, trackOf, type TrackDraft } from '../features/scenarios/track-draft.ts';
import { useDraft } from '../features/scenarios/use-draft.ts';
import { requireSession } from '../features/session/guard.ts';
import { holdsOneOf } from '../features/session/session-queries.ts';
import { counted } from '../lib/numbers.ts';
import { paths } from '../paths.ts';
import { Button } from '../ui/button.tsx';
import { TextField } from '../ui/field.tsx';
import { Message } from '../ui/message.tsx';
import { Page } from '../ui/page.tsx';

export { RouteError as ErrorBoundary } from './route-error.tsx';

export const loader = async (context: LoaderFunctionArgs) => {
  const session = await requireSession(context);
  if (session instanceof Response) return session;
  return holdsOneOf(session, TRACK_WRITERS) ? null : redirect(paths.scenarios());
};

const NEW_TABLE: TrackDraft = {
  fixes: [emptyFix(), emptyFix()],
  windAveragingS: null,
  source: '',
  asOf: null,
  vortices: [],
};

interface Started {
  name: string;
  draft: TrackDraft;
  read: Pick<ReadTrackReply, 'format' | 'conversions' | 'storms'> | null;
}

/** "IAN" as a best track writes it becomes "Ian". */
const asName = (name: string) =>
  name === name.toUpperCase() ? name.toLowerCase().replace(/\b\p{L}/gu, (letter) => letter.toUpperCase()) : name;

export function Component() {
  const [started, setStarted] = useState<Started | null>(null);
  if (started) return <NewTrack started={started} onBack={() => setStarted(null)} />;
  return (
    <Page
      title="New scenario"
      crumbs={[{ label: 'Scenarios', to: paths.scenarios() }, { label: 'New scenario' }]}
      sub="Nothing is saved until you have seen what was read and filled."
    >
      <TrackIntake
        onRead={(reply) =>
          setStarted({
            name: asName(reply.name),
            draft: { fixes: reply.fixes, windAveragingS: reply.windAveragingS, source: '', asOf: null, vortices: [] },
            read: reply,
          })
        }
        onTable={() => setStarted({ name: '', draft: NEW_TABLE, read: null })}
      />
    </Page>
  );
}

function NewTrack({ started, onBack }: { started: Started; onBack: () => void }) {
  const { draft, change, undo, canUndo } = useDraft(started.draft);
  const [name, setName] = useState(started.name);
  const [asked, setAsked] = useState(false);
  const [sortByTime, setSortByTime] = useState(false);
  const [savedAs, setSavedAs] = useState<string | null>(null);
  const create = useCreateScenario();
  const key = useRef(newIdempotencyKey());
  const navigate = useNavigate();
  const missing = missingFrom(draft);
  const nameFault = asked && name.trim() === '' ? 'Give the scenario a name.' : undefined;

  // Effects of the guard run before this one: it knows that all is saved when the page is left.
  useEffect(() => {
    if (savedAs !== null) void navigate(paths.scenario(savedAs), { replace: true });
  }, [savedAs, navigate]);

  const save = () => {
    setAsked(true);
    const track = trackOf(draft);
    if (!track || name.trim() === '') return;
    create.mutate(
      { body: { name: name.trim(), track, sortByTime }, key: key.current },
      {
        onSuccess: ({ scenarioId }) => setSavedAs(scenarioId),
        // What was refused may be mended and sent as another intent.
        onError: () => (key.current = newIdempotencyKey()),
      },
    );
  };

  return (
    <Page
      title={name.trim() || 'New scenario'}
      crumbs={[{ label: 'Scenarios', to: paths.scenarios() }, { label: 'New scenario' }]}
      sub={
        <>
          <span>{counted(draft.fixes.length, 'fix', 'fixes')}</span>
          {started.read && (
            <span>read as {started.read.format === 'best-track' ? 'best-track text' : 'our track CSV'}</span>
          )}
          {started.read?.conversions.map((conversion) => (
            <span key={conversion}>{conversion}</span>
          ))}
        </>
      }
      actions={
        <>
          <Button variant="quiet" icon={ArrowLeft} onClick={onBack}>
            Another track
          </Button>
          {canUndo && (
            <Button variant="quiet" icon={Undo2} onClick={undo}>
              Undo
            </Button>
          )}
          <Button
            variant="filled"
            icon={Save}
            pending={create.isPending || savedAs !== null}
            disabledReason={missing ?? undefined}
            onClick={save}
          >
            Save scenario
          </Button>
        </>
      }
    >
      <LeaveGuard when={savedAs === null} what="the new track" />
      <div className="mb-3.5 flex flex-col gap-3">
        {create.isError && <SaveProblem error={create.error} />}
        {asked && missing && <Message tone="error">{missing}</Message>}
        <TextField
          label="Name"
          value={name}
          maxLength={120}
          error={nameFault}
          placeholder="for example Ian, as tracked"
          className="max-w-110"
          onChange={(event) => setName(event.target.value)}
        />
      </div>
      <TrackEditor
        draft={draft}
        change={change}
        sortByTime={sortByTime}
        onSortByTime={setSortByTime}
        readOnly={false}
        fileName={name.trim() || 'track'}
      />
    </Page>
  );
}
