import { createGate } from '../../services/gate.ts';

/** How long a removal can be taken back; after that the sweep takes the bytes. */
export const keptAfterRemovalMs = 30 * 24 * 60 * 60_000;

/** Whether this film can still be taken back; the sweep takes those that cannot. */
export function isKept(deletedAtMs: number, nowMs: number): boolean {
  return nowMs - deletedAtMs < keptAfterRemovalMs;
}

/** Storing the bytes of a film with its row, and sweeping, take turns: bytes that a new row names are never taken. */
export const createBytesTurn = () => createGate(1);
