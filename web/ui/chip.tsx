import type { ReactNode } from 'react';
import { CircleAlert, CircleCheck, CircleDashed, ClockAlert, Info, OctagonAlert, type LucideIcon } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';

export type Tone = 'done' | 'caution' | 'event' | 'error' | 'info' | 'idle';

const TONES: Record<Tone, { look: string; icon: LucideIcon }> = {
  done: { look: 'bg-done-tint text-done', icon: CircleCheck },
  caution: { look: 'bg-caution-tint text-caution', icon: CircleAlert },
  event: { look: 'bg-event-tint text-event', icon: ClockAlert },
  error: { look: 'bg-error-tint text-error', icon: OctagonAlert },
  info: { look: 'bg-info-tint text-info', icon: Info },
  idle: { look: 'bg-idle-tint text-idle', icon: CircleDashed },
};

/** State in a word with its icon, then colour. */
export function Chip({
  tone,
  icon,
  children,
  className,
}: {
  tone: Tone;
  icon?: LucideIcon;
  children: ReactNode;
  className?: string;
}) {
  const { look, icon: usual } = TONES[tone];
  const Icon = icon ?? usual;
  return (
    <span
      className={classNames(
        'inline-flex h-5.5 items-center gap-1.25 rounded-1 pr-2 pl-1.5 text-12 font-bold whitespace-nowrap',
        look,
        className,
      )}
    >
      <Icon size={14} strokeWidth={1.75} aria-hidden />
      {children}
    </span>
  );
}
