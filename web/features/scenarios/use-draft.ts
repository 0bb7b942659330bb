import { useCallback, useState } from 'react';
import type { TrackDraft } from './track-draft.ts';

interface History {
  past: readonly TrackDraft[];
  present: TrackDraft;
  saved: TrackDraft;
}

export type ChangeDraft = (change: (draft: TrackDraft) => TrackDraft) => void;

/** A draft with every step undoable, and whether it differs from what was last saved. */
export function useDraft(initial: TrackDraft) {
  const [history, setHistory] = useState<History>({ past: [], present: initial, saved: initial });
  const change = useCallback<ChangeDraft>(
    (step) =>
      setHistory((before) => {
        const next = step(before.present);
        return next === before.present ? before : { ...before, past: [...before.past, before.present], present: next };
      }),
    [],
  );
  const undo = useCallback(
    () =>
      setHistory((before) => {
        const last = before.past.at(-1);
        return last ? { ...before, past: before.past.slice(0, -1), present: last } : before;
      }),
    [],
  );
  /** Starts over from what the service holds. */
  const reset = useCallback((draft: TrackDraft) => setHistory({ past: [], present: draft, saved: draft }), []);
  return {
    draft: history.present,
    change,
    undo,
    reset,
    canUndo: history.past.length > 0,
    isDirty: history.present !== history.saved,
  };
}
