import { ShieldAlert } from 'lucide-react';
import { Link } from 'react-router-dom';
import { STANDING_NOTE, STANDING_NOTE_SHORT } from '#contract/notices.ts';
import { classNames } from '../../lib/class-names.ts';
import { paths } from '../../paths.ts';

/** The strip at the foot of every screen; not dismissable, printed on every page. */
export function StandingNote({ text = STANDING_NOTE, className }: { text?: string; className?: string }) {
  return (
    <footer
      className={classNames(
        'flex items-center gap-2.25 border-t border-rule-strong bg-panel px-6 py-1.5 text-13 leading-snug max-rail:min-h-11.5 max-rail:px-3.5 max-rail:text-12',
        className,
      )}
    >
      <ShieldAlert size={16} strokeWidth={1.75} className="flex-none text-caution" aria-hidden />
      <p className="max-rail:hidden">{text}</p>
      <p className="rail:hidden">{STANDING_NOTE_SHORT}</p>
      <Link
        to={paths.limits()}
        className="ml-auto flex-none font-bold whitespace-nowrap underline underline-offset-2 max-rail:py-1"
      >
        Limits of use
      </Link>
    </footer>
  );
}
