import { randomUUID } from 'node:crypto';

export interface Ids {
  next(): string;
}

export const randomIds: Ids = { next: () => randomUUID() };
