import { useId, useState, type FormEvent } from 'react';
import { Plus, Trash2 } from 'lucide-react';
import type { VortexObservation } from '#contract/observed-vortices.ts';
import { Button } from '../../../ui/button.tsx';
import { SelectField, TextField } from '../../../ui/field.tsx';
import {
  bearingsOf,
  emptyVortexForm,
  readVortexForm,
  vortexWords,
  type VortexFaults,
  type VortexForm,
} from '../vortex-form.ts';
import { VortexCompass } from './vortex-compass.tsx';

interface ObservedVorticesProps {
  vortices: readonly VortexObservation[];
  /** Time of the chosen fix, where a new observation starts from. */
  firstTime: string | null;
  readOnly: boolean;
  onChange: (vortices: VortexObservation[]) => void;
}

const MOST = 20;
/** On the sketch, while none that can be read is typed. */
const USUAL_UNCERTAINTY = 10;

/** What radar or satellite showed of the vortices: their number and phase are then taken as seen, not drawn. */
export function ObservedVortices({ vortices, firstTime, readOnly, onChange }: ObservedVorticesProps) {
  const [form, setForm] = useState<VortexForm | null>(null);
  // The button that opened the form is gone meanwhile; back again, it takes the focus.
  const [wasOpen, setWasOpen] = useState(false);
  const headingId = useId();
  const close = () => {
    setForm(null);
    setWasOpen(true);
  };
  return (
    <section aria-labelledby={headingId} className="rounded-3 border border-rule bg-sheet p-4 shadow-1">
      <h2 id={headingId} className="text-15 font-bold">
        What radar or satellite showed
      </h2>
      <p className="mt-1 text-13 text-ink-2">
        Local maxima around the eye, or an elliptical eye, at a time. Their number and phase are then taken as seen
        instead of drawn at random; the ring is moved to one that makes as many.
      </p>
      {vortices.length > 0 && (
        <ul className="mt-2.5 divide-y divide-rule border-y border-rule">
          {vortices.map((seen, index) => (
            <li key={`${index} ${seen.time}`} className="flex items-center gap-3 py-1.5 text-13">
              <span className="min-w-0 flex-1">{vortexWords(seen)}</span>
              {!readOnly && (
                <Button
                  size="small"
                  variant="quiet"
                  icon={Trash2}
                  aria-label={`Remove observation ${index + 1}`}
                  onClick={() => onChange(vortices.filter((_, other) => other !== index))}
                >
                  Remove
                </Button>
              )}
            </li>
          ))}
        </ul>
      )}
      {vortices.length === 0 && readOnly && <p className="mt-2 text-13">Nothing was entered.</p>}
      {!readOnly && form === null && (
        <Button
          autoFocus={wasOpen}
          size="small"
          icon={Plus}
          className="mt-2.5"
          disabledReason={vortices.length >= MOST ? `a track holds ${MOST} observations` : undefined}
          onClick={() => setForm(emptyVortexForm(firstTime))}
        >
          Add an observation
        </Button>
      )}
      {form !== null && (
        <Entry
          form={form}
          onForm={setForm}
          onCancel={close}
          onAdd={(seen) => {
            onChange([...vortices, seen]);
            close();
          }}
        />
      )}
    </section>
  );
}

interface EntryProps {
  form: VortexForm;
  onForm: (form: VortexForm) => void;
  onCancel: () => void;
  onAdd: (seen: VortexObservation) => void;
}

function Entry({ form, onForm, onCancel, onAdd }: EntryProps) {
  const [faults, setFaults] = useState<VortexFaults>({});
  const uncertainty = Number(form.uncertainty);
  const field = (key: keyof VortexForm) => ({
    value: form[key],
    error: faults[key],
    onChange: ({ target }: { target: { value: string } }) => {
      onForm({ ...form, [key]: target.value });
      setFaults((before) => ({ ...before, [key]: undefined }));
    },
  });
  const submit = (event: FormEvent) => {
    event.preventDefault();
    const read = readVortexForm(form);
    if ('uncertaintyDeg' in read) onAdd(read);
    else setFaults(read);
  };
  return (
    <form
      className="mt-3 flex gap-4 max-rail:flex-col"
      aria-label="Observation of vortices"
      noValidate
      onSubmit={submit}
      onKeyDown={(event) => event.key === 'Escape' && onCancel()}
    >
      <VortexCompass
        bearings={bearingsOf(form) ?? []}
        uncertaintyDeg={uncertainty >= 1 && uncertainty <= 60 ? uncertainty : USUAL_UNCERTAINTY}
      />
      <div className="grid min-w-0 flex-1 grid-cols-2 content-start gap-3 max-rail:grid-cols-1">
        <SelectField
          label="Seen"
          autoFocus
          value={form.kind}
          onChange={({ target }) => {
            onForm({ ...form, kind: target.value === 'ellipse' ? 'ellipse' : 'maxima' });
            setFaults({});
          }}
        >
          <option value="maxima">Local maxima around the eye</option>
          <option value="ellipse">Elliptical eye</option>
        </SelectField>
        <TextField label="Time, UTC" placeholder="2026-09-03 06:00" {...field('time')} />
        {form.kind === 'maxima' ? (
          <TextField
            label="Bearings from the centre"
            unit="°"
            placeholder="20 110 200 290"
            hint="One each maximum, clockwise from north, parted by spaces."
            {...field('bearings')}
          />
        ) : (
          <>
            <TextField label="Bearing of the long axis" unit="°" inputMode="decimal" {...field('axisBearing')} />
            <TextField label="Long semi-axis" unit="km" inputMode="decimal" {...field('majorKm')} />
            <TextField label="Short semi-axis" unit="km" inputMode="decimal" {...field('minorKm')} />
            <TextField
              label="Time of a whole turn"
              unit="min"
              inputMode="decimal"
              hint="Empty: not seen."
              {...field('periodMinutes')}
            />
          </>
        )}
        <TextField label="Uncertainty" unit="± °" inputMode="decimal" {...field('uncertainty')} />
        <div className="col-span-full flex gap-2">
          <Button type="submit" size="small">
            Add it to the track
          </Button>
          <Button size="small" variant="quiet" onClick={onCancel}>
            Cancel
          </Button>
        </div>
      </div>
    </form>
  );
}
