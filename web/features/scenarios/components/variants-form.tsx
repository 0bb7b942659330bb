import { Dices } from 'lucide-react';
import type { ReactNode } from 'react';
import { Button } from '../../../ui/button.tsx';
import { Checkbox, TextField } from '../../../ui/field.tsx';
import { Segmented } from '../../../ui/segmented.tsx';
import {
  CHANGE_FIELDS,
  faultOf,
  MEMBERS_FIELD,
  SEED_FIELD,
  SPREAD_FIELDS,
  type FieldLook,
  type VariantForm,
} from '../variant-form.ts';

interface VariantsFormProps {
  form: VariantForm;
  onForm: (form: VariantForm) => void;
  /** The button that saves, or why there is none. */
  foot: ReactNode;
}

const newSeed = () => String(crypto.getRandomValues(new Uint32Array(1))[0]! >>> 1);

/** How the track is changed: once, or many times from a seed. */
export function VariantsForm({ form, onForm, foot }: VariantsFormProps) {
  const { way, change, bothSides, ensemble } = form;
  const entry = <Name extends string>(
    look: FieldLook<Name>,
    texts: Record<Name, string>,
    onTexts: (texts: Record<Name, string>) => void,
  ) => (
    <TextField
      key={look.name}
      label={look.label}
      unit={look.unit || undefined}
      inputMode={look.low < 0 ? 'text' : 'decimal'}
      autoComplete="off"
      value={texts[look.name]}
      hint={look.hint}
      error={faultOf(texts[look.name], look)}
      onChange={(event) => onTexts({ ...texts, [look.name]: event.target.value })}
    />
  );
  const onChange = (texts: VariantForm['change']) => onForm({ ...form, change: texts });
  const onEnsemble = (texts: VariantForm['ensemble']) => onForm({ ...form, ensemble: texts });
  return (
    <section aria-label="How the track is changed" className="rounded-3 border border-rule bg-sheet shadow-1">
      <div className="flex flex-col gap-3 p-4">
        <Segmented
          label="Variants"
          value={way}
          size="medium"
          options={[
            { value: 'change', label: 'One change' },
            { value: 'ensemble', label: 'Ensemble' },
          ]}
          onChange={(next) => onForm({ ...form, way: next })}
        />
        {way === 'change' ? (
          <>
            <div className="grid grid-cols-2 gap-3">
              {CHANGE_FIELDS.slice(0, 2).map((look) => entry(look, change, onChange))}
            </div>
            <Checkbox
              label="And as far to the other side"
              checked={bothSides}
              onChange={(event) => onForm({ ...form, bothSides: event.target.checked })}
            />
            <div className="grid grid-cols-2 gap-3">
              {CHANGE_FIELDS.slice(2).map((look) => entry(look, change, onChange))}
            </div>
          </>
        ) : (
          <>
            <div className="grid grid-cols-2 items-start gap-3">
              {entry(SEED_FIELD, ensemble, onEnsemble)}
              {entry(MEMBERS_FIELD, ensemble, onEnsemble)}
            </div>
            <Button
              size="small"
              icon={Dices}
              className="self-start"
              onClick={() => onEnsemble({ ...ensemble, seed: newSeed() })}
            >
              New seed
            </Button>
            <fieldset className="grid grid-cols-2 items-start gap-3 border-t border-rule pt-3">
              <legend className="float-left col-span-2 w-full text-13 text-ink-2">
                Spread, one standard deviation each; of the logarithm where it is a percentage.
              </legend>
              {SPREAD_FIELDS.map((look) => entry(look, ensemble, onEnsemble))}
            </fieldset>
          </>
        )}
      </div>
      <div className="border-t border-rule p-4">{foot}</div>
    </section>
  );
}
