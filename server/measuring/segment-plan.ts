import type { Span } from '../signal/place-list.ts';

/** Samples `[startSample, endSample)` of a recording that are measured by themselves. */
export interface Segment extends Span {
  index: number;
}

const LEAST_SEGMENT_S = 60;
/** Whole columns and points of the views at any rate: the longest frames have half as many samples. */
const LEAST_SEGMENT_SAMPLES = 2 ** 20;

/**
 * Samples per segment: the power of two from 60 s up to 120 s.
 *
 * Points of the views are powers of two as well, so each lies in one segment or is made of whole segments. It follows
 * from the rate alone: what is measured depends neither on how many segments run at once nor on where a run stopped.
 */
export function segmentSamples(sampleRateHz: number): number {
  return Math.max(LEAST_SEGMENT_SAMPLES, 2 ** Math.ceil(Math.log2(LEAST_SEGMENT_S * sampleRateHz)));
}

export function planSegments({ sampleRateHz, frames }: { sampleRateHz: number; frames: number }): Segment[] {
  const samples = segmentSamples(sampleRateHz);
  return Array.from({ length: Math.ceil(frames / samples) }, (_, index) => ({
    index,
    startSample: index * samples,
    endSample: Math.min((index + 1) * samples, frames),
  }));
}
