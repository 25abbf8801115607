/** Longer than this is a pause and no answering. */
const PAUSE_MS = 3 * 60_000;
/** A pause of this length is a rest. */
const REST_MS = 5 * 60_000;
export const REST_AFTER_MS = 25 * 60_000;
const REMEMBERED = 30;
const LEAST_ANSWERS = 3;

/** How somebody answers: for how long without a rest, and how long the last answers took. */
export interface Pace {
  /** Of the last answers, newest last. */
  tookMs: readonly number[];
  lastAtMs: number | null;
  /** Time spent answering since the last rest. */
  workedMs: number;
}

export const FRESH: Pace = { tookMs: [], lastAtMs: null, workedMs: 0 };

/** After an answer. Time while nobody answered counts neither as work nor as pace. */
export function afterAnswer(pace: Pace, { atMs, tookMs }: { atMs: number; tookMs: number }): Pace {
  const gapMs = pace.lastAtMs === null ? 0 : Math.max(0, atMs - pace.lastAtMs);
  const workedMs = gapMs >= REST_MS ? 0 : pace.workedMs + Math.min(gapMs, PAUSE_MS);
  const told = tookMs < PAUSE_MS ? [...pace.tookMs, tookMs].slice(-REMEMBERED) : pace.tookMs;
  return { tookMs: told, lastAtMs: atMs, workedMs };
}

/** After somebody has said that they had a rest, or want none. */
export function rested(pace: Pace): Pace {
  return { ...pace, workedMs: 0 };
}

/** By the median of the last answers; `null` before there are enough of them to tell. */
export function minutesLeft({ tookMs }: Pace, candidates: number): number | null {
  if (tookMs.length < LEAST_ANSWERS) return null;
  const sorted = [...tookMs].sort((a, b) => a - b);
  const middle = sorted[Math.floor(sorted.length / 2)] ?? 0;
  return Math.max(1, Math.ceil((middle * candidates) / 60_000));
}
