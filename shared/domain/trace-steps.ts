/** Points of a trace as two columns of equal length. */
export interface TracePoints {
  timesS: Float64Array;
  values: Float64Array;
}

/**
 * At most `most` points of which least and greatest value of each step of time are kept, so that a spike survives.
 * Points come in the order of time; fewer than `most` stay as they are. Cost: one pass.
 */
export function fewerPoints({ timesS, values }: TracePoints, most: number): TracePoints {
  const count = timesS.length;
  if (count <= most) return { timesS, values };
  const steps = Math.max(1, Math.floor(most / 2));
  const startS = timesS[0]!;
  const stepS = (timesS[count - 1]! - startS) / steps;
  const kept: number[] = [];
  let [low, high, step] = [0, 0, 0];
  for (let n = 0; n < count; n++) {
    const here = stepS > 0 ? Math.min(steps - 1, Math.floor((timesS[n]! - startS) / stepS)) : 0;
    if (here !== step) {
      keepBoth(kept, low, high);
      [low, high, step] = [n, n, here];
    }
    if (values[n]! < values[low]!) low = n;
    if (values[n]! > values[high]!) high = n;
  }
  keepBoth(kept, low, high);
  return {
    timesS: Float64Array.from(kept, (n) => timesS[n]!),
    values: Float64Array.from(kept, (n) => values[n]!),
  };
}

function keepBoth(kept: number[], low: number, high: number): void {
  kept.push(Math.min(low, high));
  if (low !== high) kept.push(Math.max(low, high));
}
