import type { SampleSpan } from './event-span.ts';
import type { SpanSet } from './span-set.ts';
import { intersectSpans, samplesIn, subtractSpans, toSpanSet } from './span-set.ts';

/**
 * The most time that one pixel of the picture may hold for its part to count as seen. The picture keeps maxima, so a burst of
 * any shortness keeps its height; what zooming out adds is the highest value of the noise about it. Among the columns in 10 ms
 * (15 of the ultrasonic picture at 192 kHz, 39 at 1 MHz) that lies 10 lg(ln 39 + 0.58) = 6 dB above the mean power of the noise,
 * so that a burst that stands out by 10 dB in its own column still does; and two bursts further apart than 10 ms stay two.
 * Source: expected maximum of n exponentially distributed powers, ln n + 0.577.
 */
export const longestPixelS = 0.01;

/** What is left out below this share of the part is a matter of edges and needs no reason. */
export const coveredShare = 0.99;

export function coarsestSamplesPerPixel(sampleRateHz: number): number {
  return Math.max(1, longestPixelS * sampleRateHz);
}

/** Zooms are many: the next power of two keeps the spans of like zooms together, without lifting one over the limit. */
export function zoomStep(samplesPerPixel: number, sampleRateHz: number): number {
  const step = 2 ** Math.ceil(Math.log2(Math.max(samplesPerPixel, 2 ** -10)));
  const coarsest = coarsestSamplesPerPixel(sampleRateHz);
  return samplesPerPixel <= coarsest ? Math.min(step, coarsest) : step;
}

export interface CoveredSpan extends SampleSpan {
  channel: number;
}

export interface PassExtent {
  /** What the pass is of, in each channel. */
  part: SpanSet;
  channels: number;
}

export function spansOfChannel(spans: readonly CoveredSpan[], channel: number): SpanSet {
  return toSpanSet(spans.filter((span) => span.channel === channel));
}

/** Share of the part that the spans cover, every channel counting alike; 1 for an empty part. */
export function shareCovered(spans: readonly CoveredSpan[], { part, channels }: PassExtent): number {
  const all = samplesIn(part) * channels;
  if (all === 0) return 1;
  let covered = 0;
  for (let channel = 0; channel < channels; channel += 1)
    covered += samplesIn(intersectSpans(part, spansOfChannel(spans, channel)));
  return covered / all;
}

/** What of the part no span covers, channel after channel. */
export function uncovered(spans: readonly CoveredSpan[], { part, channels }: PassExtent): CoveredSpan[] {
  return Array.from({ length: channels }, (_, channel) =>
    subtractSpans(part, spansOfChannel(spans, channel)).map((span) => ({ ...span, channel })),
  ).flat();
}
