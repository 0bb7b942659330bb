import type { Response } from 'express';

/** Raised when whoever asked hangs up before the answer is out. */
export const whileListening = (res: Response): AbortSignal => {
  const leaving = new AbortController();
  res.once('close', () => {
    if (!res.writableFinished) leaving.abort(new Error('Nobody waits for the answer any more'));
  });
  return leaving.signal;
};
