import { Loader } from 'lucide-react';
import type { Edition } from '#contract/portfolios.ts';
import { count } from '../../../lib/numbers.ts';
import { Card } from '../../../ui/card.tsx';
import { ProgressBar } from '../../../ui/progress-bar.tsx';

/** While the checks read the file: lines so far, and that one may leave. */
export function CheckingCard({ edition }: { edition: Edition }) {
  const { done, total } = edition.progress ?? { done: 0, total: null };
  return (
    <Card>
      <div role="status" className="flex flex-col gap-3 py-3">
        <p className="flex items-center gap-2.5 text-18 font-black tracking-tight">
          <Loader
            size={20}
            strokeWidth={1.75}
            className="animate-spin text-action motion-reduce:animate-none"
            aria-hidden
          />
          Checking {edition.file.name}
        </p>
        <ProgressBar label="Lines checked" done={done} total={total} className="h-2!" />
        <p className="text-13 text-ink-2">
          {total === null ? `${count(done)} lines read` : `${count(done)} of ${count(total)} lines`}. You can leave this
          page; the checks go on.
        </p>
      </div>
    </Card>
  );
}
