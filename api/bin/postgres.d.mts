export interface Cluster {
  port: number;
  serverFolder: string;
  ownerUrl(database: string): string;
  appUrl(database: string): string;
  superUrl(database: string): string;
  ensureDatabase(name: string): boolean;
  query(database: string, sql: string): string;
}
interface Place {
  folder?: string;
}

export const ROOT: string;
export const DATA_FOLDER: string;
export class SetupError extends Error {}
export function startCluster(options?: Place & { durable?: boolean }): Promise<Cluster>;
export function stopCluster(options?: Place): Promise<void>;
export function destroyCluster(options?: Place): Promise<void>;
export function clusterStatus(options?: Place): string;
