import type { Response } from 'express';

const KEEP_ALIVE_MS = 15_000;

export interface EventStream {
  send(event: unknown): void;
  /** Aborts when the listener has gone. */
  signal: AbortSignal;
  close(): void;
}

/** Opens a reply as server-sent events; comments in between keep proxies from closing it. */
export const openEvents = (res: Response): EventStream => {
  const gone = new AbortController();
  res.status(200).set({
    'Content-Type': 'text/event-stream; charset=utf-8',
    'Cache-Control': 'no-store, no-transform',
    'X-Accel-Buffering': 'no',
  });
  res.flushHeaders();
  const write = (text: string) => {
    if (!res.writableEnded && !res.destroyed) res.write(text);
  };
  const keepAlive = setInterval(() => write(': still here\n\n'), KEEP_ALIVE_MS);
  const end = () => {
    clearInterval(keepAlive);
    gone.abort();
  };
  res.on('close', end);
  return {
    send: (event) => write(`data: ${JSON.stringify(event)}\n\n`),
    signal: gone.signal,
    close: () => {
      end();
      res.end();
    },
  };
};
