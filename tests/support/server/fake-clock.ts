import type { Clock } from '../../../server/services/clock.ts';

export interface FakeClock extends Clock {
  advance(milliseconds: number): void;
}

/** Stands still until it is moved. */
export function createFakeClock(startMs = Date.UTC(2031, 4, 6, 8, 0, 0)): FakeClock {
  let now = startMs;
  return {
    nowMs: () => now,
    advance: (milliseconds) => {
      now += milliseconds;
    },
  };
}
