import { Link } from 'react-router-dom';
import type { ScenarioSummary } from '#contract/scenarios.ts';
import { ApiError } from '../../../api/api-error.ts';
import { day } from '../../../lib/dates.ts';
import { counted } from '../../../lib/numbers.ts';
import { useUnits } from '../../../lib/units.tsx';
import { paths } from '../../../paths.ts';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { Skeleton } from '../../../ui/skeleton.tsx';

const SHOWN = 5;

interface ScenariosCardProps {
  scenarios: readonly ScenarioSummary[];
  loading: boolean;
  error: Error | null;
  onRetry: () => Promise<unknown>;
  canWrite: boolean;
}

/** Tracks last worked on, each with its shape. */
export function ScenariosCard({ scenarios, loading, error, onRetry, canWrite }: ScenariosCardProps) {
  const { gust, label } = useUnits();
  return (
    <Card
      title="Scenarios"
      aside={
        <Link to={paths.scenarios()} className="font-bold no-underline hover:underline">
          All scenarios
        </Link>
      }
      padded={false}
    >
      {error && scenarios.length === 0 ? (
        <ProblemNotice
          title="The scenarios weren’t read"
          detail={error.message}
          requestId={error instanceof ApiError ? error.requestId : ''}
          onRetry={onRetry}
          className="m-4"
        />
      ) : loading ? (
        <div className="flex flex-col gap-4 px-4 py-4">
          <Skeleton width="70%" />
          <Skeleton width="55%" />
          <Skeleton width="63%" />
        </div>
      ) : scenarios.length === 0 ? (
        <p className="px-4 pt-2 pb-5 text-ink-2">
          No track yet.{' '}
          {canWrite && (
            <Link to={paths.newScenario()} className="font-bold">
              Paste a best track or draw one
            </Link>
          )}
        </p>
      ) : (
        <ul className="mt-1.5 pb-1">
          {scenarios.slice(0, SHOWN).map((scenario) => (
            <li key={scenario.id} className="border-t border-rule first:border-t-0">
              <Link
                to={paths.scenario(scenario.id)}
                className="grid grid-cols-[44px_minmax(0,1fr)] items-center gap-3 px-4 py-2 text-ink no-underline hover:bg-hover"
              >
                <TrackMark path={scenario.path} />
                <span className="min-w-0">
                  <b className="block truncate text-14">{scenario.name}</b>
                  <span className="block truncate text-12 text-ink-2">
                    version {scenario.version}, {counted(scenario.fixes, 'fix', 'fixes')}, {gust(scenario.maxWindMs)}{' '}
                    {label} at most, {day(scenario.firstTime)}
                  </span>
                </span>
              </Link>
            </li>
          ))}
        </ul>
      )}
    </Card>
  );
}

const SIZE = 44;
const INSET = 6;

/** The track's shape alone, north up. */
function TrackMark({ path }: { path: readonly (readonly [number, number])[] }) {
  const first = path[0];
  if (!first) return <span className="size-11 rounded-2 bg-well" />;
  const longitudes = path.map(([longitude]) => longitude);
  const latitudes = path.map(([, latitude]) => latitude);
  const [west, east] = [Math.min(...longitudes), Math.max(...longitudes)];
  const [south, north] = [Math.min(...latitudes), Math.max(...latitudes)];
  const shrink = Math.cos((((south + north) / 2) * Math.PI) / 180);
  const span = Math.max((east - west) * shrink, north - south, 1e-6);
  const scale = (SIZE - 2 * INSET) / span;
  const x = (longitude: number) => SIZE / 2 + (longitude - (west + east) / 2) * shrink * scale;
  const y = (latitude: number) => SIZE / 2 - (latitude - (south + north) / 2) * scale;
  const last = path.at(-1)!;
  return (
    <svg width={SIZE} height={SIZE} viewBox={`0 0 ${SIZE} ${SIZE}`} className="rounded-2 bg-map-sea" aria-hidden>
      <polyline
        points={path.map(([longitude, latitude]) => `${x(longitude).toFixed(1)},${y(latitude).toFixed(1)}`).join(' ')}
        fill="none"
        stroke="var(--map-track)"
        strokeWidth="1.7"
        strokeLinecap="round"
        strokeLinejoin="round"
      />
      <circle cx={x(last[0])} cy={y(last[1])} r="2.6" fill="var(--map-track)" />
    </svg>
  );
}
