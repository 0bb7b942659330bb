import { useDelayed } from '../lib/use-delayed.ts';
import { Mark } from '../ui/mark.tsx';

/** Before the first page is there; nothing at all for the first 300 ms. */
export function Starting() {
  const slow = useDelayed(true);
  return (
    <div className="grid h-dvh place-items-center" role="status">
      {slow && (
        <p className="flex items-center gap-3 text-ink-2">
          <Mark />
          Opening Gustloom
        </p>
      )}
    </div>
  );
}
