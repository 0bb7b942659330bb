import type { ReactNode } from 'react';
import { CircleAlert, CircleCheck, ClockAlert, Info, type LucideIcon } from 'lucide-react';
import { classNames } from '../lib/class-names.ts';

type Tone = 'error' | 'caution' | 'info' | 'event' | 'done';
const TONES: Record<Tone, { look: string; colour: string; icon: LucideIcon }> = {
  error: { look: 'bg-error-tint', colour: 'text-error', icon: CircleAlert },
  caution: { look: 'bg-caution-tint', colour: 'text-caution', icon: CircleAlert },
  info: { look: 'bg-info-tint', colour: 'text-info', icon: Info },
  event: { look: 'bg-event-tint', colour: 'text-event', icon: ClockAlert },
  done: { look: 'bg-done-tint', colour: 'text-done', icon: CircleCheck },
};

interface MessageProps {
  tone: Tone;
  icon?: LucideIcon;
  title?: ReactNode;
  children?: ReactNode;
  action?: ReactNode;
  /** Read out at once; for what just went wrong. */
  live?: boolean;
  className?: string;
}

/** What we saw, why it matters, what to do, beside where the person acted. */
export function Message({ tone, icon, title, children, action, live = tone === 'error', className }: MessageProps) {
  const { look, colour, icon: usual } = TONES[tone];
  const Icon = icon ?? usual;
  return (
    <div
      role={live ? 'alert' : undefined}
      className={classNames('flex gap-2.25 rounded-2 px-3.5 py-2.75 text-13 leading-snug', look, className)}
    >
      <Icon size={16} strokeWidth={1.75} className={classNames('mt-px flex-none', colour)} aria-hidden />
      <div className="min-w-0 flex-1">
        {title && <p className="font-bold">{title}</p>}
        {children}
        {action && <div className="mt-2">{action}</div>}
      </div>
    </div>
  );
}
