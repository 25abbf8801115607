interface Sample {
  atMs: number;
  sentBytes: number;
}

/** A shorter window jumps about, a longer one tells of a connection that was. */
const windowMs = 8000;
const leastSpanMs = 800;

/** Speed of a transfer from what was sent during the last seconds. */
export function createTransferRate() {
  let samples: Sample[] = [];

  /** Bytes per second; null until there is enough to say. */
  function add(sentBytes: number, atMs: number): number | null {
    samples = [...samples.filter((sample) => atMs - sample.atMs <= windowMs), { atMs, sentBytes }];
    const first = samples[0];
    if (!first || atMs - first.atMs < leastSpanMs) return null;
    return Math.max(0, (sentBytes - first.sentBytes) / ((atMs - first.atMs) / 1000));
  }

  return { add };
}

/** Seconds until the rest is sent; null where the speed does not tell. */
export function secondsLeft(restBytes: number, bytesPerSecond: number | null): number | null {
  if (bytesPerSecond === null || bytesPerSecond <= 0) return null;
  return restBytes / bytesPerSecond;
}
