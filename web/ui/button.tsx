import { useId, type ComponentProps, type ReactNode, type Ref } from 'react';
import { Loader2, Lock, type LucideIcon } from 'lucide-react';
import { Link, type LinkProps } from 'react-router-dom';
import { classNames } from '../lib/class-names.ts';

type Variant = 'filled' | 'outlined' | 'quiet';
type Size = 'small' | 'medium' | 'large';

const BASE =
  'inline-flex items-center justify-center gap-2 rounded-2 border font-bold whitespace-nowrap no-underline select-none transition-colors duration-(--quick)';
const SIZES: Record<Size, string> = {
  small: 'h-7.5 px-2.75 text-13 pointer-coarse:h-11',
  medium: 'h-9 px-3.5 text-14 pointer-coarse:h-11',
  large: 'h-12 px-4.5 text-16',
};
const VARIANTS: Record<Variant, string> = {
  filled: 'border-action bg-action text-on-fill hover:bg-action-hover hover:border-action-hover active:bg-action-press',
  outlined: 'border-edge bg-sheet text-ink hover:bg-hover active:bg-selected',
  quiet: 'border-transparent bg-transparent px-2 text-link hover:bg-hover active:bg-selected',
};
const DISABLED = 'border-dashed border-edge bg-transparent text-ink-2 cursor-not-allowed';
const ICON_SIZES: Record<Size, number> = { small: 15, medium: 16, large: 18 };

interface Look {
  /** One filled button a screen. */
  variant?: Variant;
  size?: Size;
  icon?: LucideIcon;
  /** After the label, for a step onwards. */
  trailingIcon?: LucideIcon;
}

const looks = ({ variant = 'outlined', size = 'medium' }: Look, className?: string) =>
  classNames(BASE, SIZES[size], VARIANTS[variant], className);

interface ButtonProps extends Look, Omit<ComponentProps<'button'>, 'disabled' | 'ref'> {
  /** The icon turns into a spinner; further presses don't count. */
  pending?: boolean;
  /** Dashed, still focusable, with the reason beside it. */
  disabledReason?: string | undefined;
  /** Where the reason stands; `none` when the page says it elsewhere and the text is only read out. */
  reasonPlacement?: 'below' | 'none';
  children: ReactNode;
  ref?: Ref<HTMLButtonElement>;
}

export function Button({
  variant,
  size = 'medium',
  icon: Icon,
  trailingIcon: TrailingIcon,
  pending = false,
  disabledReason,
  reasonPlacement = 'below',
  className,
  children,
  onClick,
  type = 'button',
  ...rest
}: ButtonProps) {
  const reasonId = useId();
  const blocked = disabledReason !== undefined;
  const Leading = blocked ? Lock : Icon;
  const button = (
    <button
      {...rest}
      type={blocked ? 'button' : type}
      className={blocked ? classNames(BASE, SIZES[size], DISABLED, className) : looks({ variant, size }, className)}
      aria-disabled={blocked || pending || undefined}
      aria-busy={pending || undefined}
      aria-describedby={blocked ? reasonId : rest['aria-describedby']}
      onClick={(event) => {
        if (blocked || pending) {
          event.preventDefault();
          return;
        }
        onClick?.(event);
      }}
    >
      {pending ? (
        <Loader2 size={ICON_SIZES[size]} className="animate-spin motion-reduce:animate-none" aria-hidden />
      ) : (
        Leading && <Leading size={ICON_SIZES[size]} strokeWidth={1.75} aria-hidden />
      )}
      {children}
      {TrailingIcon && !blocked && !pending && <TrailingIcon size={ICON_SIZES[size]} strokeWidth={1.75} aria-hidden />}
    </button>
  );
  if (!blocked) return button;
  if (reasonPlacement === 'none')
    return (
      <>
        {button}
        <span id={reasonId} className="sr-only">
          {disabledReason}
        </span>
      </>
    );
  return (
    <span className={classNames('inline-flex flex-col gap-1', className?.includes('w-full') && 'w-full')}>
      {button}
      <span id={reasonId} className="max-w-72 text-12 text-ink-2">
        {disabledReason}
      </span>
    </span>
  );
}

interface ButtonLinkProps extends Look, Omit<LinkProps, 'className'> {
  className?: string;
}

/** A link that looks like a button: it goes somewhere, it changes nothing. */
export function ButtonLink({
  variant,
  size = 'medium',
  icon: Icon,
  trailingIcon: TrailingIcon,
  className,
  children,
  ...rest
}: ButtonLinkProps) {
  return (
    <Link {...rest} className={looks({ variant, size }, className)}>
      {Icon && <Icon size={ICON_SIZES[size]} strokeWidth={1.75} aria-hidden />}
      {children}
      {TrailingIcon && <TrailingIcon size={ICON_SIZES[size]} strokeWidth={1.75} aria-hidden />}
    </Link>
  );
}

/** An icon alone; its label is read out and shown as a tooltip. */
export function IconButton({
  label,
  icon: Icon,
  className,
  ...rest
}: { label: string; icon: LucideIcon } & Omit<ComponentProps<'button'>, 'children'>) {
  return (
    <button
      type="button"
      {...rest}
      aria-label={label}
      title={label}
      className={classNames(
        'grid size-8 place-items-center rounded-2 text-ink-2 hover:bg-hover hover:text-ink pointer-coarse:size-11',
        className,
      )}
    >
      <Icon size={18} strokeWidth={1.75} aria-hidden />
    </button>
  );
}
