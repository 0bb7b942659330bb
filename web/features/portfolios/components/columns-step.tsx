import { useId, useState } from 'react';
import { ArrowRight, Check, Circle, CircleAlert, TriangleAlert } from 'lucide-react';
import { SiteField, type Column, type Edition } from '#contract/portfolios.ts';
import { classNames } from '../../../lib/class-names.ts';
import { counted } from '../../../lib/numbers.ts';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { SelectField, TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { CURRENCIES } from '../currencies.ts';
import { useMapColumns } from '../edition-queries.ts';
import { FIELD_GROUPS, FIELD_NAMES } from '../field-names.ts';
import { doubleClaims, mappingWarnings, readExpectedRows, readExpectedTiv, startingForm } from '../mapping-form.ts';

interface ColumnsStepProps {
  edition: Edition;
  canWrite: boolean;
  onMapped: () => void;
}

const SAMPLES = 3;

/** Which column is which field: samples on the left, our fields by need on the right. */
export function ColumnsStep({ edition, canWrite, onMapped }: ColumnsStepProps) {
  const [form, setForm] = useState(() => startingForm(edition));
  const [submitted, setSubmitted] = useState(false);
  const mapColumns = useMapColumns(edition.id);
  const claims = doubleClaims(form, edition.columns);
  const warnings = mappingWarnings(form);
  const rows = readExpectedRows(form.expectedRows);
  const tiv = readExpectedTiv(form.expectedTiv, form.currency);
  const mapped = new Set(form.fields.values());
  const leftOut = edition.columns.filter(({ index }) => !form.fields.has(index));

  const setField = (index: number, field: SiteField | null) => {
    const fields = new Map(form.fields);
    if (field) fields.set(index, field);
    else fields.delete(index);
    setForm({ ...form, fields });
  };
  const submit = () => {
    setSubmitted(true);
    if (claims.size > 0 || rows.error || tiv.error || form.fields.size === 0) return;
    mapColumns.mutate(
      {
        columns: [...form.fields].map(([index, field]) => ({ index, field })),
        currency: form.currency,
        expectedRows: rows.value,
        expectedTivMinor: tiv.value,
        decimal: form.decimal,
        valuesIn: form.valuesIn,
      },
      { onSuccess: onMapped },
    );
  };

  return (
    <form
      noValidate
      className="grid items-start gap-4 wide:grid-cols-[minmax(0,1fr)_330px]"
      onSubmit={(event) => {
        event.preventDefault();
        submit();
      }}
    >
      <Card
        title="Columns found"
        aside={`${form.fields.size} of ${edition.columns.length} mapped`}
        padded={false}
        className="pb-1"
      >
        <div
          aria-hidden
          className="mt-2 grid grid-cols-[minmax(0,1fr)_232px] gap-4 border-b border-rule-strong px-4 pb-1.5 text-12 text-ink-2 max-rail:hidden"
        >
          <span>Column and first values</span>
          <span>Our field</span>
        </div>
        <ul aria-label="Columns of the file" className="max-rail:mt-2 max-rail:border-t max-rail:border-rule">
          {edition.columns.map((column) => (
            <ColumnRow
              key={column.index}
              column={column}
              field={form.fields.get(column.index) ?? null}
              fault={claims.get(form.fields.get(column.index)!)}
              readOnly={!canWrite}
              onField={(field) => setField(column.index, field)}
            />
          ))}
        </ul>
        {leftOut.length > 0 && (
          <p className="border-t border-rule-strong bg-well px-4 py-3 text-13 text-ink-2">
            <b className="text-ink">{counted(leftOut.length, 'column')} left out of the database:</b>{' '}
            {leftOut.map(({ name }) => name).join(', ')}.
          </p>
        )}
      </Card>
      <div className="flex flex-col gap-4">
        <Card title="How numbers are written">
          <div className="flex flex-col gap-3">
            <SelectField
              label="Decimals"
              value={form.decimal ?? ''}
              onChange={(event) =>
                setForm({
                  ...form,
                  decimal: event.target.value === '' ? null : (event.target.value as 'point' | 'comma'),
                })
              }
            >
              <option value="">As the cells show</option>
              <option value="point">Point: 1,234.50</option>
              <option value="comma">Comma: 1.234,50</option>
            </SelectField>
            <SelectField
              label="Amounts are in"
              value={form.valuesIn ?? ''}
              onChange={(event) =>
                setForm({
                  ...form,
                  valuesIn: event.target.value === '' ? null : (event.target.value as 'units' | 'thousands'),
                })
              }
            >
              <option value="">Ask me if it looks like thousands</option>
              <option value="units">{form.currency}, as written</option>
              <option value="thousands">Thousands of {form.currency}</option>
            </SelectField>
          </div>
        </Card>
        <Card title="Control totals" aside="checked before sealing">
          <p className="mb-3 text-13 text-ink-2">
            What the broker’s summary says. Leave empty what you don’t know; repeats and total lines don’t count.
          </p>
          <div className="flex flex-col gap-3">
            <SelectField
              label="Currency"
              aside={mapped.has('currency') ? 'for rows without one' : 'of every value'}
              value={form.currency}
              onChange={(event) => setForm({ ...form, currency: event.target.value })}
            >
              {[...new Set([edition.currency, ...CURRENCIES])].map((code) => (
                <option key={code}>{code}</option>
              ))}
            </SelectField>
            <TextField
              label="Sites expected"
              inputMode="numeric"
              className="[&_input]:text-right"
              value={form.expectedRows}
              error={rows.error}
              onChange={(event) => setForm({ ...form, expectedRows: event.target.value })}
            />
            <TextField
              label="TIV expected"
              aside={form.currency}
              inputMode="decimal"
              className="[&_input]:text-right"
              value={form.expectedTiv}
              error={tiv.error}
              onChange={(event) => setForm({ ...form, expectedTiv: event.target.value })}
            />
          </div>
        </Card>
        <div className="flex flex-col gap-2.5 max-rail:sticky max-rail:-bottom-3.5 max-rail:-mx-3.5 max-rail:border-t max-rail:border-rule-strong max-rail:bg-sheet max-rail:p-3.5">
          {[...claims.values()].map((sentence) => (
            <Message key={sentence} tone="error" live={submitted}>
              {sentence}
            </Message>
          ))}
          {submitted && form.fields.size === 0 && (
            <Message tone="error">No column is mapped. Choose a field for at least one column.</Message>
          )}
          {claims.size === 0 &&
            warnings.map((sentence) => (
              <Message key={sentence} tone="caution" icon={TriangleAlert}>
                {sentence}
              </Message>
            ))}
          {mapColumns.isError && (
            <Message tone="error" title="The mapping wasn’t taken">
              {mapColumns.error.message}
            </Message>
          )}
          <Button
            type="submit"
            variant="filled"
            trailingIcon={ArrowRight}
            pending={mapColumns.isPending}
            disabledReason={canWrite ? undefined : 'Auditors read only. Underwriters and modelers can map columns.'}
            className="h-11! w-full text-15"
          >
            Use this mapping
          </Button>
        </div>
        <Card title="Our fields" aside="by need">
          <FieldsByNeed mapped={mapped} claimed={new Set(claims.keys())} />
        </Card>
      </div>
    </form>
  );
}

const CONFIDENCE_LOOK = { sure: 'text-done', likely: 'text-info', guess: 'text-caution' };

interface ColumnRowProps {
  column: Column;
  field: SiteField | null;
  fault: string | undefined;
  readOnly: boolean;
  onField: (field: SiteField | null) => void;
}

function ColumnRow({ column, field, fault, readOnly, onField }: ColumnRowProps) {
  const noteId = useId();
  const { suggestion } = column;
  const followed = suggestion !== null && suggestion.field === field;
  return (
    <li className="grid grid-cols-[minmax(0,1fr)_232px] items-center gap-x-4 gap-y-1.5 border-b border-rule px-4 py-2 last:border-b-0 max-rail:grid-cols-1 max-rail:px-3.5">
      <div className="min-w-0">
        <b className="block truncate">{column.name || `Column ${column.index + 1}`}</b>
        <span className="block truncate text-13 text-ink-2">
          {column.samples.slice(0, SAMPLES).map((sample, index) => (
            <span key={index}>
              {index > 0 && <span className="mx-1.5 text-rule-strong">|</span>}
              {sample || <i>blank</i>}
            </span>
          ))}
        </span>
      </div>
      <div className="flex items-center gap-2.5">
        <SelectField
          label={`Field for ${column.name}`}
          labelHidden
          className={classNames('min-w-0 flex-1', field === null && '[&_select]:border-dashed [&_select]:text-ink-2')}
          value={field ?? ''}
          disabled={readOnly}
          aria-describedby={noteId}
          onChange={(event) => onField(event.target.value === '' ? null : SiteField.parse(event.target.value))}
        >
          <option value="">Leave out</option>
          {FIELD_GROUPS.map((group) => (
            <optgroup key={group.title} label={group.title}>
              {group.fields.map((name) => (
                <option key={name} value={name}>
                  {FIELD_NAMES[name]}
                </option>
              ))}
            </optgroup>
          ))}
        </SelectField>
        <span
          id={noteId}
          className={classNames(
            'flex w-13 flex-none items-center gap-1 text-12 font-bold',
            fault ? 'text-error' : followed ? CONFIDENCE_LOOK[suggestion.confidence] : 'text-ink-2',
          )}
        >
          {fault ? (
            <>
              <CircleAlert size={14} aria-hidden /> twice
            </>
          ) : followed ? (
            suggestion.confidence
          ) : field ? (
            'by you'
          ) : (
            ''
          )}
        </span>
      </div>
    </li>
  );
}

function FieldsByNeed({ mapped, claimed }: { mapped: ReadonlySet<SiteField>; claimed: ReadonlySet<SiteField> }) {
  return (
    <div className="flex flex-col">
      {FIELD_GROUPS.map((group) => (
        <section key={group.title} className="border-t border-rule py-2.25 first:border-t-0 first:pt-0 last:pb-0">
          <h3 className="mb-1 flex justify-between gap-2 text-13 font-bold tracking-normal">
            {group.title}
            <span className="font-normal text-ink-2">{group.need}</span>
          </h3>
          <ul className="flex flex-wrap gap-x-3 gap-y-0.5 text-13">
            {group.fields.map((field) => {
              const has = mapped.has(field);
              return (
                <li
                  key={field}
                  className={classNames(
                    'flex items-center gap-1',
                    claimed.has(field) ? 'font-bold text-error' : has ? 'text-ink' : 'text-ink-2',
                  )}
                >
                  {has ? (
                    <Check size={13} strokeWidth={2.5} className="text-action" aria-label="Mapped:" />
                  ) : (
                    <Circle size={9} strokeWidth={2} className="mx-0.5 text-rule-strong" aria-label="Not mapped:" />
                  )}
                  {FIELD_NAMES[field]}
                </li>
              );
            })}
          </ul>
        </section>
      ))}
    </div>
  );
}
