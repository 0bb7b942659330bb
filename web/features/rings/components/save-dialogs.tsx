import { useRef, useState } from 'react';
import { Link } from 'react-router-dom';
import type { Calibration } from '#contract/models.ts';
import { failureOf } from '../../../api/failure.ts';
import { newIdempotencyKey } from '../../../api/idempotency-key.ts';
import { decimal } from '../../../lib/numbers.ts';
import { paths } from '../../../paths.ts';
import { Button } from '../../../ui/button.tsx';
import { Dialog } from '../../../ui/dialog.tsx';
import { SelectField, TextArea } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { useDraftCalibration, useSaveRing } from '../ring-queries.ts';

interface RingToSave {
  width: number;
  eye: number;
}
const inWords = ({ width, eye }: RingToSave) => `ring width ${decimal(width, 2)}, eye ratio ${decimal(eye, 2)}`;
const ringOf = ({ width, eye }: RingToSave) => ({ ringWidthFraction: width, eyeVorticityRatio: eye });

/** One key for one intent: trying again after a lost answer saves nothing twice, a changed body is another intent. */
const useIntent = () => {
  const intent = useRef({ body: '', key: '' });
  return (body: object): string => {
    const text = JSON.stringify(body);
    if (intent.current.body !== text) intent.current = { body: text, key: newIdempotencyKey() };
    return intent.current.key;
  };
};

interface ScenarioDialogProps {
  ring: RingToSave;
  scenarios: readonly { id: string; name: string; version: number }[];
  onClose: () => void;
}

/** Puts the ring at every fix of a scenario, as its next version. */
export function SaveToScenario({ ring, scenarios, onClose }: ScenarioDialogProps) {
  const [id, setId] = useState('');
  const save = useSaveRing();
  const keyOf = useIntent();
  const chosen = scenarios.find((scenario) => scenario.id === id);
  const submit = () => {
    if (!chosen) return;
    const body = { basedOn: chosen.version, ...ringOf(ring) };
    save.mutate({ scenarioId: chosen.id, body, key: keyOf({ id, ...body }) });
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title="Save the ring to a scenario"
      actions={
        save.data ? (
          <Button onClick={onClose}>Close</Button>
        ) : (
          <>
            <Button onClick={onClose}>Keep it here</Button>
            <Button
              variant="filled"
              pending={save.isPending}
              disabledReason={chosen ? undefined : 'choose a scenario'}
              onClick={submit}
            >
              {chosen ? `Save as version ${chosen.version + 1}` : 'Save'}
            </Button>
          </>
        )
      }
    >
      {save.data ? (
        <Message tone="done" title={`Saved as version ${save.data.number} of ${save.data.name}`} live>
          <Link to={paths.scenario(save.data.scenarioId)}>See the scenario</Link>
        </Message>
      ) : (
        <div className="flex flex-col gap-3">
          <p className="text-14">
            Sets {inWords(ring)} at every fix. The track stays as it is; earlier versions and runs keep their ring.
          </p>
          {scenarios.length === 0 ? (
            <p className="text-14">
              There is no scenario yet. <Link to={paths.newScenario()}>Enter a track</Link> first.
            </p>
          ) : (
            <SelectField label="Scenario" value={id} onChange={({ target }) => setId(target.value)}>
              <option value="">Choose one</option>
              {scenarios.map((scenario) => (
                <option key={scenario.id} value={scenario.id}>
                  {scenario.name}, version {scenario.version}
                </option>
              ))}
            </SelectField>
          )}
          {save.isError && <ProblemNotice title="The ring wasn’t saved" {...failureOf(save.error)} />}
        </div>
      )}
    </Dialog>
  );
}

interface DraftDialogProps {
  ring: RingToSave;
  base: Calibration;
  onClose: () => void;
}

/** Drafts the next version of a calibration with this ring. */
export function SendToDraft({ ring, base, onClose }: DraftDialogProps) {
  const [note, setNote] = useState('');
  const draft = useDraftCalibration();
  const keyOf = useIntent();
  const submit = () => {
    const body = { basedOnId: base.id, note: note.trim(), ...ringOf(ring) };
    draft.mutate({ body, key: keyOf(body) });
  };
  return (
    <Dialog
      open
      onClose={onClose}
      title={`Send the ring to a draft of ${base.code}`}
      actions={
        draft.data ? (
          <Button onClick={onClose}>Close</Button>
        ) : (
          <>
            <Button onClick={onClose}>Keep it here</Button>
            <Button
              variant="filled"
              pending={draft.isPending}
              disabledReason={note.trim() === '' ? 'say why first' : undefined}
              onClick={submit}
            >
              Save draft
            </Button>
          </>
        )
      }
    >
      {draft.data ? (
        <Message tone="done" title={`${draft.data.code} version ${draft.data.version} is a draft`} live>
          Runs on it are stamped until another person has signed it.
        </Message>
      ) : (
        <div className="flex flex-col gap-3">
          <p className="text-14">
            Takes {base.code} version {base.version} and sets {inWords(ring)} (it has{' '}
            {decimal(base.settings.ringWidthFraction, 2)} and {decimal(base.settings.eyeVorticityRatio, 2)}). The signed
            version stays in force; a draft must be signed by somebody other than you.
          </p>
          <TextArea
            label="Why this ring"
            value={note}
            maxLength={500}
            onChange={({ target }) => setNote(target.value)}
          />
          {draft.isError && <ProblemNotice title="The draft wasn’t saved" {...failureOf(draft.error)} />}
        </div>
      )}
    </Dialog>
  );
}
