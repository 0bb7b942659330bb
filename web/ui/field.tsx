import { useId, type ComponentProps, type ReactNode, type Ref } from 'react';
import { ChevronDown, CircleAlert } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';

const EDGE =
  'w-full rounded-2 border border-edge bg-sheet text-14 text-ink placeholder:text-ink-2 hover:border-ink-2 aria-invalid:border-2 aria-invalid:border-error';

interface FrameProps {
  label: ReactNode;
  /** Right of the label: what it is used for, in few words. */
  aside?: ReactNode;
  hint?: ReactNode;
  error?: string | undefined;
  className?: string;
  /** The label is read out but not drawn, where the surroundings show it. */
  labelHidden?: boolean;
}

interface Wiring {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

/** Label above, hint or fault below, wired for screen readers; the control itself is given by the caller. */
export function Field({
  label,
  aside,
  hint,
  error,
  className,
  labelHidden = false,
  children,
}: FrameProps & { children: (wiring: Wiring) => ReactNode }) {
  const id = useId();
  const noteId = `${id}-note`;
  const hasNote = error !== undefined || hint !== undefined;
  return (
    <div className={className}>
      <div className={labelHidden ? 'sr-only' : 'mb-1.25 flex items-baseline justify-between gap-3 text-13'}>
        <label htmlFor={id} className="font-bold">
          {label}
        </label>
        {aside && <span className="text-ink-2">{aside}</span>}
      </div>
      {children({ id, 'aria-describedby': hasNote ? noteId : undefined, 'aria-invalid': error ? true : undefined })}
      {hasNote && (
        <p id={noteId} className={classNames('mt-1.25 flex gap-1.5 text-13', error ? 'text-error' : 'text-ink-2')}>
          {error && <CircleAlert size={15} strokeWidth={1.75} className="mt-px flex-none" aria-hidden />}
          <span>{error ?? hint}</span>
        </p>
      )}
    </div>
  );
}

type Height = 'control' | 'tall';
const HEIGHTS: Record<Height, string> = { control: 'control px-2.75', tall: 'h-11 px-3 text-15' };

interface TextFieldProps extends FrameProps, Omit<ComponentProps<'input'>, 'className' | 'height' | 'ref'> {
  height?: Height;
  /** Unit inside the field's right end. */
  unit?: ReactNode;
  ref?: Ref<HTMLInputElement>;
  /** Why it can't be changed; the field turns dashed and says so below. */
  disabledReason?: string | undefined;
}

export function TextField({
  label,
  aside,
  hint,
  error,
  className,
  labelHidden,
  height = 'control',
  unit,
  disabledReason,
  ...input
}: TextFieldProps) {
  const blocked = disabledReason !== undefined;
  return (
    <Field {...{ label, aside, error, className, labelHidden }} hint={disabledReason ?? hint}>
      {(wiring) => (
        <div className="relative">
          <input
            {...input}
            {...wiring}
            aria-describedby={wiring['aria-describedby'] ?? input['aria-describedby']}
            readOnly={blocked || input.readOnly}
            aria-disabled={blocked || undefined}
            className={classNames(
              EDGE,
              HEIGHTS[height],
              blocked && 'border-dashed bg-well',
              input.type === 'number' &&
                'text-right [appearance:textfield] [&::-webkit-inner-spin-button]:appearance-none',
              unit !== undefined && 'pr-12',
            )}
          />
          {unit !== undefined && (
            <span className="pointer-events-none absolute inset-y-0 right-3 grid place-items-center text-13 text-ink-2">
              {unit}
            </span>
          )}
        </div>
      )}
    </Field>
  );
}

interface SelectFieldProps extends FrameProps, Omit<ComponentProps<'select'>, 'className' | 'height'> {
  height?: Height;
  ref?: Ref<HTMLSelectElement>;
}

export function SelectField({
  label,
  aside,
  hint,
  error,
  className,
  labelHidden,
  height = 'control',
  children,
  ...select
}: SelectFieldProps) {
  return (
    <Field {...{ label, aside, hint, error, className, labelHidden }}>
      {(wiring) => (
        <div className="relative">
          <select
            {...select}
            {...wiring}
            aria-describedby={wiring['aria-describedby'] ?? select['aria-describedby']}
            className={classNames(EDGE, HEIGHTS[height], 'appearance-none pr-8')}
          >
            {children}
          </select>
          <ChevronDown
            size={16}
            strokeWidth={1.75}
            className="pointer-events-none absolute top-1/2 right-2.5 -translate-y-1/2 text-ink-2"
            aria-hidden
          />
        </div>
      )}
    </Field>
  );
}

interface TextAreaProps extends FrameProps, Omit<ComponentProps<'textarea'>, 'className'> {
  ref?: Ref<HTMLTextAreaElement>;
}

export function TextArea({ label, aside, hint, error, className, labelHidden, ...area }: TextAreaProps) {
  return (
    <Field {...{ label, aside, hint, error, className, labelHidden }}>
      {(wiring) => <textarea rows={3} {...area} {...wiring} className={classNames(EDGE, 'px-2.75 py-2')} />}
    </Field>
  );
}

interface CheckboxProps extends Omit<ComponentProps<'input'>, 'type' | 'className'> {
  label: ReactNode;
  hint?: ReactNode;
  className?: string;
  ref?: Ref<HTMLInputElement>;
}

export function Checkbox({ label, hint, className, ...input }: CheckboxProps) {
  const hintId = useId();
  return (
    <label className={classNames('flex gap-2.75 leading-snug', className)}>
      <input
        {...input}
        type="checkbox"
        aria-describedby={hint ? hintId : undefined}
        className="mt-px size-5 flex-none cursor-pointer rounded-1 accent-(--action)"
      />
      <span>
        <span className="font-bold">{label}</span>
        {hint && (
          <span id={hintId} className="mt-px block text-13 text-ink-2">
            {hint}
          </span>
        )}
      </span>
    </label>
  );
}
