import type { Peaks } from '@shared/contract/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { pixelAtSample, windowSamples } from '@/composables/bench/time-axis.ts';
import type { WaveformLook } from '@/components/bench/waveform-drawing.ts';

/** Samples stand apart from each other by at least this when they are drawn one by one, in pixels of the screen. */
const DOTS_FROM_PX = 5;
const LEAST_RADIUS_PX = 1.8;
const MOST_RADIUS_PX = 4;

/** Whether every sample has a place of its own: the peaks are the samples, and those are far enough apart. */
export function areSamplesApart(peaks: Peaks, window: TimeWindow, widthPx: number): boolean {
  return peaks.samplesPerPoint === 1 && widthPx / windowSamples(window) >= DOTS_FROM_PX;
}

export interface SampleDot {
  x: number;
  value: number;
}

/** Each sample in the middle of its time, with one more beyond either edge so that the line goes on there. */
export function sampleDots(peaks: Peaks, window: TimeWindow, widthPx: number): SampleDot[] {
  const first = Math.max(0, Math.floor(window.startSample - peaks.startSample) - 1);
  const end = Math.min(peaks.minimum.length, Math.ceil(window.endSample - peaks.startSample) + 1);
  return peaks.minimum.slice(first, end).map((value, index) => ({
    x: pixelAtSample(peaks.startSample + first + index + 0.5, window, widthPx),
    value,
  }));
}

/** Dots joined by straight lines; between them nothing was recorded. */
export function drawSamples(
  context: CanvasRenderingContext2D,
  dots: readonly SampleDot[],
  { scale, colours }: WaveformLook,
): void {
  const { width, height } = context.canvas;
  const middle = height / 2;
  const yOf = (value: number) => middle - (value / scale) * (middle - MOST_RADIUS_PX);
  context.fillStyle = colours.hairline;
  context.fillRect(0, Math.round(middle), width, 1);
  context.strokeStyle = colours.melt;
  context.lineWidth = 1.25;
  context.beginPath();
  for (const [index, { x, value }] of dots.entries()) {
    if (index === 0) context.moveTo(x, yOf(value));
    else context.lineTo(x, yOf(value));
  }
  context.stroke();
  const apart = dots.length > 1 ? dots[1]!.x - dots[0]!.x : MOST_RADIUS_PX;
  const radius = Math.min(MOST_RADIUS_PX, Math.max(LEAST_RADIUS_PX, apart / 5));
  context.fillStyle = colours.melt;
  for (const { x, value } of dots) {
    context.beginPath();
    context.arc(x, yOf(value), radius, 0, 2 * Math.PI);
    context.fill();
  }
}
