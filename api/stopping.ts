import type { Logger } from 'pino';

const LONGEST_MS = 30_000;

/** Ends the process in good order on a signal or when its parent is gone; a second signal ends it at once. */
export const whenAskedToStop = (log: Logger, stop: () => Promise<void>): void => {
  let stopping = false;
  const begin = () => {
    if (stopping) process.exit(1);
    stopping = true;
    setTimeout(() => process.exit(1), LONGEST_MS).unref();
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        log.error({ err: error }, 'stopping failed');
        process.exit(1);
      },
    );
  };
  process.on('SIGTERM', begin);
  process.on('SIGINT', () => {
    if (!stopping) begin();
  });
  process.on('disconnect', begin);
};
