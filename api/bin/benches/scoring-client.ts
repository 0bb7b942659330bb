import { fork } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import type { ScoringAnswer } from './scoring-process.ts';

const PROGRAM = fileURLToPath(new URL('./scoring-process.ts', import.meta.url));

/** A warmed-up process that scores sites when asked. */
export interface ScoringClient {
  score: (count: number) => Promise<ScoringAnswer>;
  close: () => Promise<void>;
}

/** Starts one and waits until it is warm. */
export const startScoring = async (): Promise<ScoringClient> => {
  const child = fork(PROGRAM, { execArgv: ['--import', 'tsx'], stdio: ['ignore', 'ignore', 'inherit', 'ipc'] });
  await once(child, 'message');
  return {
    async score(count) {
      child.send(count);
      const [answer] = (await once(child, 'message')) as [ScoringAnswer];
      return answer;
    },
    async close() {
      child.disconnect();
      await once(child, 'exit');
    },
  };
};
