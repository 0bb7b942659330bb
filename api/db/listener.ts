import { Client } from 'pg';
import type { Logger } from 'pino';

const AGAIN_MS = 500;

/**
 * Hears what transactions announce. On a connection of its own, outside the pool, because a pooled connection forgets;
 * payloads carry ids only, so nothing of any organisation passes here.
 */
export class Listener {
  private readonly listeners = new Map<string, Set<(payload: string | null) => void>>();
  private client: Promise<Client> | null = null;
  private isClosed = false;

  constructor(
    private readonly databaseUrl: string,
    private readonly log: Logger,
  ) {}

  /** `hear` gets each payload, and null when something may have been missed. Gives the way to stop hearing. */
  async listen(channel: string, hear: (payload: string | null) => void): Promise<() => void> {
    const client = await this.connected();
    let heard = this.listeners.get(channel);
    if (!heard) {
      heard = new Set();
      this.listeners.set(channel, heard);
      await client.query(`listen ${client.escapeIdentifier(channel)}`);
    }
    heard.add(hear);
    return () => void heard.delete(hear);
  }

  async close(): Promise<void> {
    this.isClosed = true;
    const client = await this.client?.catch(() => null);
    await client?.end();
  }

  private connected(): Promise<Client> {
    this.client ??= this.connect().catch((error: unknown) => {
      this.client = null;
      throw error;
    });
    return this.client;
  }

  private async connect(): Promise<Client> {
    const client = new Client({ connectionString: this.databaseUrl, application_name: 'gustloom listener' });
    client.on('notification', ({ channel, payload }) => this.tell(channel, payload ?? ''));
    client.on('error', (error) => this.lost(error));
    client.on('end', () => this.lost(null));
    await client.connect();
    for (const channel of this.listeners.keys()) await client.query(`listen ${client.escapeIdentifier(channel)}`);
    return client;
  }

  private lost(error: Error | null): void {
    if (this.isClosed || this.client === null) return;
    this.client = null;
    this.log.warn({ err: error }, 'the listening connection was lost');
    this.comeBack();
  }

  private comeBack(): void {
    setTimeout(() => {
      if (this.isClosed) return;
      this.connected().then(
        () => [...this.listeners.keys()].forEach((channel) => this.tell(channel, null)),
        () => this.comeBack(),
      );
    }, AGAIN_MS).unref();
  }

  private tell(channel: string, payload: string | null): void {
    for (const hear of this.listeners.get(channel) ?? []) hear(payload);
  }
}
