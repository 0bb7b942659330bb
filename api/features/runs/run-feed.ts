import type { RunEvent } from '#contract/runs.ts';

/** Hears the payloads of a channel, or null when some may have been missed. */
export interface Announcements {
  listen(channel: string, hear: (payload: string | null) => void): Promise<() => void>;
}

interface Following {
  runId: string;
  channel: string;
  /** State as stored now; null when there is nothing to see any more. */
  read: () => Promise<RunEvent | null>;
  send: (event: RunEvent) => void;
  signal: AbortSignal;
}

/** Between two readings for one listener, however often something is announced. */
const PAUSE_MS = 200;
/** Read now and then without any announcement, in case one was lost. */
const LOOK_AGAIN_MS = 15_000;

const isOver = ({ state }: RunEvent) => state !== 'waiting' && state !== 'working';

/** Sends a run's state whenever it changed, until it is over or nobody listens. */
export const followRun = async (
  announcements: Announcements,
  { runId, channel, read, send, signal }: Following,
): Promise<void> => {
  const heard = { isDue: false, wake: (): void => undefined };
  const due = () => {
    heard.isDue = true;
    heard.wake();
  };
  const stopHearing = await announcements.listen(channel, (payload) => {
    if (payload === null || payload === runId) due();
  });
  signal.addEventListener('abort', due, { once: true });
  try {
    for (let last = ''; !signal.aborted;) {
      heard.isDue = false;
      const event = await read();
      if (event === null) return;
      const text = JSON.stringify(event);
      if (text !== last) send(event);
      last = text;
      if (isOver(event)) return;
      await pause(PAUSE_MS);
      if (heard.isDue) continue;
      await new Promise<void>((resolve) => {
        const timer = setTimeout(resolve, LOOK_AGAIN_MS);
        heard.wake = () => {
          clearTimeout(timer);
          resolve();
        };
      });
    }
  } finally {
    stopHearing();
    signal.removeEventListener('abort', due);
  }
};

const pause = (milliseconds: number) => new Promise((resolve) => setTimeout(resolve, milliseconds));
