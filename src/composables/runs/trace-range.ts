/** A stretch of run time, in seconds. */
export interface PlotSpan {
  fromS: number;
  toS: number;
}

/** Beside the recordings, so that what leads up to them is seen. */
const ROOM = 0.1;

/** From the first of them to the last; `null` of none. */
export function rangeAround(spans: readonly PlotSpan[]): PlotSpan | null {
  if (spans.length === 0) return null;
  return {
    fromS: Math.min(...spans.map(({ fromS }) => fromS)),
    toS: Math.max(...spans.map(({ toS }) => toS)),
  };
}

/** The part of the whole in which there are recordings, with room beside it; `null` where that is all of it. */
export function recordedRange(recordings: readonly PlotSpan[], whole: PlotSpan): PlotSpan | null {
  const inner = rangeAround(recordings);
  if (inner === null) return null;
  const room = ROOM * (inner.toS - inner.fromS);
  const range = {
    fromS: Math.max(whole.fromS, inner.fromS - room),
    toS: Math.min(whole.toS, inner.toS + room),
  };
  return range.fromS > whole.fromS || range.toS < whole.toS ? range : null;
}
