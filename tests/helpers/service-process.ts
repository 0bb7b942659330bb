import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';

const entry = (name: 'worker' | 'server') => fileURLToPath(new URL(`../../api/${name}.ts`, import.meta.url));

export interface ServiceProcess {
  child: ChildProcess;
  /** What it said on its error output, for a failing test to show. */
  said(): string;
  /** As if the machine had taken it away: no signal handler runs. */
  kill(): Promise<void>;
}

const running = new Set<ChildProcess>();

/** A worker or an API of its own, as in production, ready when this returns. */
export const startService = async (
  name: 'worker' | 'server',
  databaseUrl: string,
  more: Record<string, string> = {},
): Promise<ServiceProcess> => {
  const child = fork(entry(name), {
    execArgv: ['--import', 'tsx'],
    stdio: ['ignore', 'ignore', 'pipe', 'ipc'],
    env: {
      PATH: process.env.PATH,
      NODE_ENV: 'test',
      PORT: '3000',
      PUBLIC_URL: 'http://localhost:3000',
      DATABASE_URL: databaseUrl,
      TOKEN_SECRET: 'a secret for tests, long enough for them',
      CSRF_SECRET: 'another secret for tests, as long as that',
      LOG_LEVEL: 'silent',
      SMTP_URL: 'smtp://127.0.0.1:9',
      MAIL_FROM: 'Gustloom <no-reply@gustloom.example>',
      STRIPE_SECRET_KEY: 'sk_test_0000000000000000',
      STRIPE_WEBHOOK_SECRET: 'whsec_0000000000000000',
      STRIPE_API_URL: 'http://127.0.0.1:9',
      ...more,
    },
  });
  running.add(child);
  child.once('exit', () => running.delete(child));
  let said = '';
  child.stderr!.on('data', (text: Buffer) => (said += text.toString()));
  const ended = once(child, 'exit').then(() => 'ended' as const);
  const first = await Promise.race([once(child, 'message'), ended]);
  if (first === 'ended') throw new Error(`The ${name} ended before it was ready:\n${said}`);
  return {
    child,
    said: () => said,
    kill: async () => {
      child.kill('SIGKILL');
      await ended;
    },
  };
};

/** For a test's end: nothing of it goes on. */
export const endServices = async (): Promise<void> => {
  for (const child of running) child.kill('SIGKILL');
  while (running.size > 0) await new Promise((resolve) => setTimeout(resolve, 20));
};
