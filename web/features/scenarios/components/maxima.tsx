import { Gauge } from 'lucide-react';
import type { ResolvedFix } from '#contract/scenarios.ts';
import { clock, shortDay } from '../../../lib/dates.ts';
import { decimal } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';

/** Both maxima of the chosen fix at the same size, and which one is used. */
export function Maxima({ fix, number }: { fix: ResolvedFix; number: number }) {
  const { gust, label } = useUnits();
  const { reportedMaxWindMs: reported, pressureImpliedMaxWindMs: implied, intensitySource: used } = fix;
  return (
    <div className="min-w-0">
      <h3 className="flex items-center gap-2 text-13 font-bold tracking-normal">
        <Gauge size={16} strokeWidth={1.75} className="text-ink-2" aria-hidden />
        Maximum wind at fix {number}, {shortDay(fix.time)} {clock(fix.time)}, 1-min, {label}
      </h3>
      <dl className="mt-1.5 grid grid-cols-2 gap-x-4">
        <Maximum
          term="Reported wind"
          value={reported === null ? 'not given' : gust(reported)}
          isUsed={used === 'wind'}
        />
        <Maximum
          term={`Implied by ${decimal(fix.centralPressureHpa, 0)} hPa`}
          value={implied === null ? 'no pressure given' : gust(implied)}
          isUsed={used === 'pressure'}
        />
      </dl>
    </div>
  );
}

function Maximum({ term, value, isUsed }: { term: string; value: string; isUsed: boolean }) {
  return (
    <div>
      <dt className="text-12 text-ink-2">{term}</dt>
      <dd className="text-20 font-black tracking-tight">
        {value} {isUsed && <span className="text-12 font-bold tracking-normal text-done">used</span>}
      </dd>
    </div>
  );
}
