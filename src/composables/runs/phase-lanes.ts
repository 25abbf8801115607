interface Span {
  startNs: number;
  endNs: number;
}

/** More than these would leave no room for their names. */
const MOST_LANES = 3;

/** For each span, in order of start, the first lane in which it overlaps none before it; what finds none goes last. */
export function lanesOf(spans: readonly Span[]): number[] {
  const lanesEndNs: number[] = [];
  return spans.map(({ startNs, endNs }) => {
    const free = lanesEndNs.findIndex((laneEndNs) => laneEndNs <= startNs);
    const lane = free >= 0 ? free : Math.min(lanesEndNs.length, MOST_LANES - 1);
    lanesEndNs[lane] = Math.max(lanesEndNs[lane] ?? Number.NEGATIVE_INFINITY, endNs);
    return lane;
  });
}
