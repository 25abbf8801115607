import type { Peaks } from '@shared/contract/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';

/**
 * Least and greatest value under each pixel, in turn: least 0, greatest 0, least 1, ... Where a pixel is narrower
 * than a point of the peaks, values between the middles of the points are on straight lines. NaN where the peaks
 * do not reach.
 *
 * @param peaks as the server gives them, at any place and step.
 * @param widthPx whole pixels, 1 and more.
 */
export function waveformColumns(peaks: Peaks, window: TimeWindow, widthPx: number): Float32Array {
  const columns = new Float32Array(widthPx * 2);
  const pointsPerPixel = windowSamples(window) / widthPx / peaks.samplesPerPoint;
  const firstPoint = (window.startSample - peaks.startSample) / peaks.samplesPerPoint;
  for (let x = 0; x < widthPx; x++) {
    const from = firstPoint + x * pointsPerPixel;
    const column =
      pointsPerPixel >= 1
        ? extremes(peaks, from, from + pointsPerPixel)
        : between(peaks, from + pointsPerPixel / 2);
    columns[2 * x] = column.least;
    columns[2 * x + 1] = column.greatest;
  }
  return columns;
}

interface Extremes {
  least: number;
  greatest: number;
}

function extremes(peaks: Peaks, from: number, to: number): Extremes {
  const first = Math.max(0, Math.floor(from));
  const end = Math.min(peaks.minimum.length, Math.max(first + 1, Math.ceil(to)));
  let least = Number.NaN;
  let greatest = Number.NaN;
  if (to <= 0) return { least, greatest };
  for (let point = first; point < end; point++) {
    const low = peaks.minimum[point] ?? 0;
    const high = peaks.maximum[point] ?? 0;
    if (!(low >= least)) least = low;
    if (!(high <= greatest)) greatest = high;
  }
  return { least, greatest };
}

/** The middle of point n stands at n + 0.5. */
function between(peaks: Peaks, place: number): Extremes {
  const last = peaks.minimum.length - 1;
  if (place < 0 || place > last + 1) return { least: Number.NaN, greatest: Number.NaN };
  const left = Math.min(last, Math.max(0, Math.floor(place - 0.5)));
  const right = Math.min(last, left + 1);
  const share = Math.min(1, Math.max(0, place - 0.5 - left));
  const mix = (values: readonly number[]) => (values[left] ?? 0) * (1 - share) + (values[right] ?? 0) * share;
  return { least: mix(peaks.minimum), greatest: mix(peaks.maximum) };
}

/** The greatest magnitude among the columns; 0 where there is none. */
export function greatestMagnitude(columns: Float32Array): number {
  let greatest = 0;
  for (const value of columns) if (Math.abs(value) > greatest) greatest = Math.abs(value);
  return greatest;
}

/** The full height of the waveform: 1, 2 or 5 times a power of ten above what is shown, never beyond full scale. */
export function niceScale(magnitude: number): number {
  if (!(magnitude > 0)) return 1;
  const power = 10 ** Math.floor(Math.log10(magnitude));
  const scale = [1, 2, 5, 10].map((factor) => factor * power).find((value) => value >= magnitude * 0.98);
  return Math.min(1, scale ?? 1);
}
