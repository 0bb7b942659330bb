import { Client } from 'pg';
import type { Logger } from 'pino';
import { JOB_LOCK, QUEUE_SCHEMA } from './queue.ts';

const LOOK_MS = 700;
/** Between taking a job and locking it a worker needs a moment. */
const GRACE_S = 2;

interface ActiveJob {
  id: string;
  name: string;
  retry_count: number;
}

/** Gives jobs of killed workers back to the queue: active by their row, but nobody holds their lock. */
export class Reaper {
  private client: Client | null = null;
  private timer: NodeJS.Timeout | undefined;
  private looking: Promise<void> = Promise.resolve();
  private readonly suspects = new Set<string>();

  constructor(
    private readonly databaseUrl: string,
    private readonly log: Logger,
  ) {}

  start(): void {
    this.timer = setTimeout(() => {
      this.looking = this.look()
        .catch((error: unknown) => this.log.error({ err: error }, 'reaper'))
        .finally(() => {
          if (this.timer) this.start();
        });
    }, LOOK_MS);
  }

  async stop(): Promise<void> {
    clearTimeout(this.timer);
    this.timer = undefined;
    await this.looking;
    await this.client?.end();
    this.client = null;
  }

  private async look(): Promise<void> {
    const client = await this.connect();
    const { rows } = await client.query<ActiveJob>(
      `select id, name, retry_count from ${QUEUE_SCHEMA}.job
       where state = 'active' and started_on < now() - make_interval(secs => $1)`,
      [GRACE_S],
    );
    const free = new Map<string, ActiveJob>();
    for (const job of rows) if (await this.isUnheld(client, job.id)) free.set(`${job.id} ${job.retry_count}`, job);
    // Seen free twice in a row: a job being marked as done is free for a moment, too.
    for (const [key, job] of free) {
      if (this.suspects.has(key)) await this.giveBack(client, job);
    }
    this.suspects.clear();
    for (const key of free.keys()) this.suspects.add(key);
  }

  private async isUnheld(client: Client, jobId: string): Promise<boolean> {
    const { rows } = await client.query<{ got: boolean }>(`select pg_try_advisory_lock(${JOB_LOCK}) as got`, [jobId]);
    if (!rows[0]?.got) return false;
    await client.query(`select pg_advisory_unlock(${JOB_LOCK})`, [jobId]);
    return true;
  }

  private async giveBack(client: Client, { id, name, retry_count }: ActiveJob): Promise<void> {
    const { rowCount } = await client.query(
      `update ${QUEUE_SCHEMA}.job set
         state = (case when retry_count < retry_limit then 'retry' else 'failed' end)::${QUEUE_SCHEMA}.job_state,
         start_after = now(),
         completed_on = case when retry_count < retry_limit then null else now() end,
         output = '{"message": "the worker was lost"}'
       where name = $1 and id = $2 and state = 'active' and retry_count = $3`,
      [name, id, retry_count],
    );
    if (rowCount === 1) this.log.warn({ job: id, queue: name }, 'a worker was lost; its job goes back to the queue');
  }

  private async connect(): Promise<Client> {
    if (this.client) return this.client;
    const client = new Client({ connectionString: this.databaseUrl, application_name: 'gustloom reaper' });
    client.on('error', (error) => {
      this.log.error({ err: error }, 'reaper lost its connection');
      this.client = null;
    });
    await client.connect();
    this.client = client;
    return client;
  }
}
