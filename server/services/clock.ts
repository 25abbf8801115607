import { v7 as uuidV7 } from 'uuid';

export interface Clock {
  nowMs(): number;
}

export interface IdSource {
  next(): string;
}

export const systemClock: Clock = { nowMs: () => Date.now() };

/** UUIDv7 (RFC 9562): rows of one table sort by creation. */
export const systemIds: IdSource = { next: () => uuidV7() };

export function toInstant(epochMs: number): string {
  return new Date(epochMs).toISOString();
}
