import type { SampleSpan } from './event-span.ts';

/** Half-open spans by rising start that neither overlap nor touch: each set of samples has exactly one such list. */
export type SpanSet = readonly SampleSpan[];

/** Any spans in any order; empty ones are left out. Cost: n log n. */
export function toSpanSet(spans: readonly SampleSpan[]): SpanSet {
  const sorted = spans
    .filter((span) => span.endSample > span.startSample)
    .toSorted((a, b) => a.startSample - b.startSample);
  const joined: { startSample: number; endSample: number }[] = [];
  for (const { startSample, endSample } of sorted) {
    const last = joined.at(-1);
    if (last && startSample <= last.endSample) last.endSample = Math.max(last.endSample, endSample);
    else joined.push({ startSample, endSample });
  }
  return joined;
}

export function uniteSpans(...sets: SpanSet[]): SpanSet {
  return toSpanSet(sets.flat());
}

/** What lies in both. Cost: n + m. */
export function intersectSpans(a: SpanSet, b: SpanSet): SpanSet {
  const common: SampleSpan[] = [];
  for (let i = 0, j = 0; i < a.length && j < b.length;) {
    const [left, right] = [a[i], b[j]];
    if (!left || !right) break;
    const startSample = Math.max(left.startSample, right.startSample);
    const endSample = Math.min(left.endSample, right.endSample);
    if (startSample < endSample) common.push({ startSample, endSample });
    if (left.endSample < right.endSample) i += 1;
    else j += 1;
  }
  return common;
}

/** What of `from` lies not in `taken`. Cost: n + m. */
export function subtractSpans(from: SpanSet, taken: SpanSet): SpanSet {
  const rest: SampleSpan[] = [];
  let next = 0;
  for (const { startSample, endSample } of from) {
    let at = startSample;
    while ((taken[next]?.endSample ?? Infinity) <= at) next += 1;
    for (let k = next; at < endSample; k += 1) {
      const hole = taken[k];
      const stop = Math.min(hole?.startSample ?? Infinity, endSample);
      if (stop > at) rest.push({ startSample: at, endSample: stop });
      if (!hole || hole.startSample >= endSample) break;
      at = Math.max(at, hole.endSample);
    }
  }
  return rest;
}

export function samplesIn(set: SpanSet): number {
  return set.reduce((sum, { startSample, endSample }) => sum + endSample - startSample, 0);
}

export function holdsSample(set: SpanSet, sample: number): boolean {
  return set.some(({ startSample, endSample }) => sample >= startSample && sample < endSample);
}
