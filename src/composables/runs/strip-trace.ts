/** A temperature line of the strip, on the clock of the run. */
export interface StripTrace {
  id: string;
  name: string;
  unit: string;
  /** By rising time. */
  points: readonly { ns: number; value: number }[];
  /** Jumps back towards the melting point: from the onset to the top. */
  recalescences: readonly { startNs: number; endNs: number; value: number }[];
}

/** The value at a time, along the straight line between two points; `null` outside. */
export function traceValueAt({ points }: Pick<StripTrace, 'points'>, ns: number): number | null {
  const after = points.findIndex((point) => point.ns >= ns);
  const right = points[after];
  if (right === undefined) return null;
  const left = points[after - 1];
  if (left === undefined) return right.ns === ns ? right.value : null;
  const share = (ns - left.ns) / Math.max(1, right.ns - left.ns);
  return left.value + share * (right.value - left.value);
}

export function valueRange(
  traces: readonly Pick<StripTrace, 'points'>[],
): { low: number; high: number } | null {
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const { points } of traces)
    for (const { value } of points) {
      low = Math.min(low, value);
      high = Math.max(high, value);
    }
  return low <= high ? { low, high: high > low ? high : low + 1 } : null;
}
