import { useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { Minus, Plus } from 'lucide-react';
import { failureOf } from '../../../api/failure.ts';
import { useDelayed } from '../../../lib/use-delayed.ts';
import { useSettled } from '../../../lib/use-settled.ts';
import { TrackChart } from '../../../ui/charts/track-chart.tsx';
import { Button } from '../../../ui/button.tsx';
import { Card } from '../../../ui/card.tsx';
import { ProblemNotice } from '../../../ui/problem.tsx';
import { filledSummary } from '../filled-summary.ts';
import { resolutionQuery } from '../scenario-queries.ts';
import {
  missingFrom,
  strongestFix,
  trackOf,
  withFix,
  withFixAfter,
  withoutFix,
  type TrackDraft,
} from '../track-draft.ts';
import type { ChangeDraft } from '../use-draft.ts';
import { DeclarationsStrip } from './declarations-strip.tsx';
import { FindingsList } from './findings-list.tsx';
import { FixDetails } from './fix-details.tsx';
import { FixGrid } from './fix-grid.tsx';
import { Maxima } from './maxima.tsx';
import { ObservedVortices } from './observed-vortices.tsx';
import { TrackMap } from './track-map.tsx';

interface TrackEditorProps {
  draft: TrackDraft;
  change: ChangeDraft;
  sortByTime: boolean;
  onSortByTime: (sort: boolean) => void;
  readOnly: boolean;
  fileName: string;
}

const SETTLE_MS = 350;

/** Map left; declarations, fixes, findings right; wind and radius along the track at the foot. */
export function TrackEditor({ draft, change, sortByTime, onSortByTime, readOnly, fileName }: TrackEditorProps) {
  const [chosen, setChosen] = useState(() => strongestFix(draft.fixes));
  const row = Math.min(chosen, Math.max(0, draft.fixes.length - 1));
  const settled = useSettled(draft, SETTLE_MS);
  const track = trackOf(settled);
  const resolution = useQuery(resolutionQuery(track, sortByTime));
  const waiting = useDelayed(resolution.isFetching || settled !== draft);
  // An answer about other fixes must not stand beside these.
  const fits = track !== null && resolution.data?.fixes.length === draft.fixes.length;
  const resolved = fits ? resolution.data!.fixes : [];
  const missing = missingFrom(draft);
  const chosenFix = resolved[row];

  return (
    <div className="flex flex-col gap-3.5">
      <div className="grid grid-cols-[minmax(0,500px)_minmax(0,1fr)] gap-3.5 max-wide:grid-cols-1">
        <div className="sticky top-0 h-full max-h-160 min-h-110 max-wide:static max-wide:h-110 max-rail:h-75 max-rail:min-h-75">
          <TrackMap
            fixes={draft.fixes}
            resolution={fits ? resolution.data! : null}
            chosen={row}
            onChoose={setChosen}
            onMove={
              readOnly
                ? undefined
                : (fix, [longitude, latitude]) =>
                    change((before) =>
                      withFix(before, fix, {
                        longitude: Math.round(longitude * 1e3) / 1e3,
                        latitude: Math.round(latitude * 1e3) / 1e3,
                      }),
                    )
            }
          />
        </div>
        <div className="flex min-w-0 flex-col gap-3.5">
          <DeclarationsStrip draft={draft} change={change} readOnly={readOnly} />
          <Card padded={false} className="overflow-hidden">
            <div className="max-h-86 overflow-y-auto">
              <FixGrid
                fixes={draft.fixes}
                resolved={resolved}
                chosen={row}
                onChoose={setChosen}
                change={change}
                readOnly={readOnly}
              />
            </div>
            {!readOnly && (
              <div className="flex flex-wrap items-center gap-2 border-t border-rule bg-well px-4 py-2">
                <Button
                  size="small"
                  icon={Plus}
                  onClick={() => {
                    change((before) => withFixAfter(before, row));
                    setChosen(draft.fixes.length === 0 ? 0 : row + 1);
                  }}
                >
                  Add a fix after {row + 1}
                </Button>
                <Button
                  size="small"
                  icon={Minus}
                  disabledReason={draft.fixes.length <= 1 ? 'a track needs one fix' : undefined}
                  onClick={() => {
                    change((before) => withoutFix(before, row));
                    setChosen(Math.max(0, row - 1));
                  }}
                >
                  Remove fix {row + 1}
                </Button>
                <span className="ml-auto text-12 text-ink-2 max-rail:hidden">
                  F2 edits, Tab goes on, Alt-arrows move 1 km
                </span>
              </div>
            )}
          </Card>
          <div className="grid grid-cols-2 rounded-3 border border-rule bg-sheet shadow-1 max-rail:grid-cols-1">
            <div className="border-r border-rule p-4 max-rail:border-r-0 max-rail:border-b">
              {chosenFix ? (
                <Maxima fix={chosenFix} number={row + 1} />
              ) : (
                <p className="text-13 text-ink-2">
                  {missing ?? 'Both maxima of the chosen fix stand here once the track can be resolved.'}
                </p>
              )}
            </div>
            <div className="min-w-0" aria-live="polite" aria-busy={waiting}>
              {resolution.isError ? (
                <ProblemNotice
                  title="The track wasn’t checked"
                  {...failureOf(resolution.error)}
                  onRetry={() => resolution.refetch()}
                  className="m-3"
                />
              ) : track === null || !resolution.data ? (
                <p className="p-4 text-13 text-ink-2">{missing ?? 'Checking the track …'}</p>
              ) : (
                <FindingsList
                  findings={resolution.data.findings}
                  filled={filledSummary(resolved)}
                  onShow={setChosen}
                  consent={{ given: sortByTime, onGive: onSortByTime }}
                />
              )}
            </div>
          </div>
          {draft.fixes[row] && (
            <FixDetails
              fix={draft.fixes[row]}
              resolved={chosenFix}
              number={row + 1}
              readOnly={readOnly}
              onChange={(value) => change((before) => withFix(before, row, value))}
            />
          )}
          <ObservedVortices
            vortices={draft.vortices}
            firstTime={draft.fixes[row]?.time ?? null}
            readOnly={readOnly}
            onChange={(vortices) => change((before) => ({ ...before, vortices }))}
          />
        </div>
      </div>
      {resolved.length > 1 && (
        <Card>
          <TrackChart fixes={resolved} chosen={row} onChoose={setChosen} fileName={`${fileName}-wind-and-radius`} />
        </Card>
      )}
    </div>
  );
}
