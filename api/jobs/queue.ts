import { setTimeout as sleep } from 'node:timers/promises';
import { Client } from 'pg';
import PgBoss from 'pg-boss';
import type { Logger } from 'pino';
import { connectionOf } from '../db/connection.ts';
import type { Tx } from '../transact.ts';

/** Puts work into the queue in the caller's transaction: it is there exactly when the facts it rests on are. */
export interface Jobs {
  enqueue(tx: Tx, name: string, data: object): Promise<void>;
}

export interface Job {
  id: string;
  data: unknown;
  /** 0 the first time; more after a failure or a killed worker. */
  restarts: number;
  /** Aborts when the process is asked to stop; whatever is stored by then is kept. */
  signal: AbortSignal;
}
export type JobHandler = (job: Job) => Promise<void>;

export const QUEUE_SCHEMA = 'pgboss';
/** The number of the advisory lock that a worker holds while a job is in its hands. */
export const JOB_LOCK = 'hashtextextended($1::text, 0)';

const QUEUE_OPTIONS = { retryLimit: 8, retryDelay: 1, retryBackoff: false, expireInHours: 12, retentionDays: 14 };
const POLL_S = 0.5;
const LOCK_POLL_MS = 200;
/** The queue marks a job as done only after its handler has returned; the lock outlives that moment. */
const LOCK_LINGER_MS = 5_000;
const STOP_MS = 25_000;

interface QueueSettings {
  databaseUrl: string;
  log: Logger;
  /** Looks after the queue's tables; one process in the house is enough, more do no harm. */
  supervise: boolean;
  /** Without its locks a process would compute what another one has been given: it must end, or start anew. */
  onLocksLost: (error: Error) => void;
}

/** Jobs in PostgreSQL: enqueued within transactions, held by an advisory lock so that a killed worker is noticed. */
export class Queue implements Jobs {
  private readonly boss: PgBoss;
  private readonly known = new Map<string, Promise<void>>();
  private readonly stopping = new AbortController();
  private locks: Client | null = null;

  constructor(private readonly settings: QueueSettings) {
    this.boss = new PgBoss({
      connectionString: settings.databaseUrl,
      schema: QUEUE_SCHEMA,
      application_name: 'gustloom queue',
      max: settings.supervise ? 4 : 2,
      supervise: settings.supervise,
      schedule: false,
      maintenanceIntervalSeconds: 60,
    });
    this.boss.on('error', (error) => settings.log.error({ err: error }, 'queue'));
  }

  async start(): Promise<void> {
    await this.boss.start();
  }

  async enqueue(tx: Tx, name: string, data: object): Promise<void> {
    await this.ensure(name);
    const connection = await connectionOf(tx);
    const id = await this.boss.send(name, data, {
      ...QUEUE_OPTIONS,
      db: { executeSql: (text, values) => connection.query(text, values) },
    });
    if (id === null) throw new Error(`The queue ${name} took no job`);
  }

  /** Takes jobs of one name, at most `concurrency` at once in this process. */
  async work(name: string, handler: JobHandler, concurrency = 1): Promise<void> {
    await this.ensure(name);
    const locks = await this.openLocks();
    for (let slot = 0; slot < concurrency; slot += 1) {
      await this.boss.work(
        name,
        { pollingIntervalSeconds: POLL_S, batchSize: 1, includeMetadata: true },
        async ([job]: PgBoss.JobWithMetadata<object>[]) => {
          if (job) await this.carryOut(locks, job, handler);
        },
      );
    }
  }

  /** Lets jobs in hand finish for a while; those that don't are handed back. */
  async stop(): Promise<void> {
    this.stopping.abort();
    await this.boss.stop({ graceful: true, timeout: STOP_MS });
    const { locks } = this;
    this.locks = null;
    await locks?.end();
  }

  private async carryOut(locks: Client, job: PgBoss.JobWithMetadata<object>, handler: JobHandler): Promise<void> {
    await this.takeLock(locks, job.id);
    // Had this worker been held up before the lock, another one may have got the job meanwhile.
    if (!(await this.isStillOurs(locks, job))) {
      await this.releaseLock(locks, job.id);
      return;
    }
    try {
      await handler({ id: job.id, data: job.data, restarts: job.retryCount, signal: this.stopping.signal });
      setTimeout(() => void this.releaseLock(locks, job.id), LOCK_LINGER_MS).unref();
    } catch (error) {
      this.settings.log.error({ err: error, job: job.id, queue: job.name, restarts: job.retryCount }, 'job failed');
      await this.releaseLock(locks, job.id);
      throw error;
    }
  }

  private async takeLock(locks: Client, jobId: string): Promise<void> {
    for (;;) {
      const { rows } = await locks.query<{ got: boolean }>(`select pg_try_advisory_lock(${JOB_LOCK}) as got`, [jobId]);
      if (rows[0]?.got) return;
      await sleep(LOCK_POLL_MS);
    }
  }

  private async isStillOurs(locks: Client, job: PgBoss.JobWithMetadata<object>): Promise<boolean> {
    const { rowCount } = await locks.query(
      `select from ${QUEUE_SCHEMA}.job where name = $1 and id = $2 and state = 'active' and retry_count = $3`,
      [job.name, job.id, job.retryCount],
    );
    return rowCount === 1;
  }

  private async releaseLock(locks: Client, jobId: string): Promise<void> {
    if (this.locks !== locks) return;
    await locks.query(`select pg_advisory_unlock(${JOB_LOCK})`, [jobId]);
  }

  private async openLocks(): Promise<Client> {
    if (this.locks) return this.locks;
    const locks = new Client({ connectionString: this.settings.databaseUrl, application_name: 'gustloom job locks' });
    locks.on('error', (cause) => {
      if (this.locks !== locks) return;
      this.locks = null;
      this.settings.onLocksLost(new Error('The connection that holds the job locks was lost', { cause }));
    });
    await locks.connect();
    this.locks = locks;
    return locks;
  }

  private ensure(name: string): Promise<void> {
    let ensured = this.known.get(name);
    if (!ensured) {
      ensured = this.boss.createQueue(name, { name, ...QUEUE_OPTIONS });
      ensured.catch(() => this.known.delete(name));
      this.known.set(name, ensured);
    }
    return ensured;
  }
}
