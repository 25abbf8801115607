/** 5 s, 20 s, 80 s, 320 s: long enough for a full disk to be noticed, short enough to be waited for. */
export function retryDelayMs(attemptsMade: number): number {
  if (!Number.isInteger(attemptsMade) || attemptsMade < 1) {
    throw new RangeError(`attemptsMade must be a whole number from 1, not ${attemptsMade}`);
  }
  return 5000 * 4 ** (Math.min(attemptsMade, 5) - 1);
}
