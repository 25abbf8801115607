import { decimalsOf, multiplesWithin, niceStep } from '@/composables/axis-ticks.ts';

/**
 * The part of a recording that is shown, in samples from its start. Both edges may lie between samples, so that
 * zooming around a pointer is smooth and can be undone.
 */
export interface TimeWindow {
  startSample: number;
  /** Exclusive. */
  endSample: number;
}

/** Fewer samples than this make no picture. */
const LEAST_SAMPLES = 16;

export function windowSamples(window: TimeWindow): number {
  return window.endSample - window.startSample;
}

export function wholeWindow(frames: number): TimeWindow {
  return { startSample: 0, endSample: frames };
}

/** Moves the window into the recording and keeps its length, as far as the recording is long enough. */
export function clampWindow(window: TimeWindow, frames: number): TimeWindow {
  const wanted = Math.max(windowSamples(window), LEAST_SAMPLES);
  const samples = Math.min(wanted, frames);
  const startSample = Math.min(Math.max(0, window.startSample), frames - samples);
  return { startSample, endSample: startSample + samples };
}

export function sampleAtPixel(pixel: number, window: TimeWindow, widthPx: number): number {
  return window.startSample + (pixel / Math.max(1, widthPx)) * windowSamples(window);
}

export function pixelAtSample(sample: number, window: TimeWindow, widthPx: number): number {
  return ((sample - window.startSample) / windowSamples(window)) * widthPx;
}

/** A factor above 1 shows more; the sample under the pointer stays where it is, unless an end is in the way. */
export function zoomAround(
  window: TimeWindow,
  factor: number,
  anchorSample: number,
  frames: number,
): TimeWindow {
  const least = Math.min(LEAST_SAMPLES, frames);
  const samples = Math.min(Math.max(windowSamples(window) * factor, least), frames);
  const share = (anchorSample - window.startSample) / windowSamples(window);
  const startSample = anchorSample - share * samples;
  return clampWindow({ startSample, endSample: startSample + samples }, frames);
}

export function panBy(window: TimeWindow, samples: number, frames: number): TimeWindow {
  return clampWindow(
    { startSample: window.startSample + samples, endSample: window.endSample + samples },
    frames,
  );
}

/** The same zoom with this sample in the middle. */
export function centreOn(window: TimeWindow, sample: number, frames: number): TimeWindow {
  return panBy(window, sample - (window.startSample + window.endSample) / 2, frames);
}

/** A span with room on both sides, never closer than the least window. */
export function windowAround(span: TimeWindow, frames: number, room = 4): TimeWindow {
  const samples = Math.max(windowSamples(span) * (1 + 2 * room), LEAST_SAMPLES * 8);
  const middle = (span.startSample + span.endSample) / 2;
  return clampWindow({ startSample: middle - samples / 2, endSample: middle + samples / 2 }, frames);
}

export interface AxisTick {
  value: number;
  label: string;
}

const CLOCK_STEPS_S = [10, 30, 60, 120, 300, 600, 1800, 3600, 7200, 21_600];

function stepInSeconds(leastS: number): number {
  if (leastS <= 5) return niceStep(leastS);
  return CLOCK_STEPS_S.find((step) => step >= leastS) ?? niceStep(leastS);
}

function clockLabel(seconds: number): string {
  const whole = Math.round(seconds);
  const parts = [Math.floor(whole / 60) % 60, whole % 60].map((part) => String(part).padStart(2, '0'));
  const hours = Math.floor(whole / 3600);
  return hours > 0 ? `${hours}:${parts.join(':')}` : `${Math.floor(whole / 60)}:${parts[1]}`;
}

function secondsLabel(seconds: number, decimals: number): string {
  const [whole = '', fraction = ''] = seconds.toFixed(decimals).split('.');
  const grouped = fraction.match(/.{1,3}/g)?.join('\u202F');
  return `${grouped ? `${whole}.${grouped}` : whole}\u00A0s`;
}

export interface TickOptions {
  sampleRateHz: number;
  widthPx: number;
  /** Least distance of two labels. */
  distancePx?: number;
}

/** Places in seconds with their labels: a clock while steps are seconds and longer, else seconds with a unit. */
export function timeTicks(window: TimeWindow, options: TickOptions): AxisTick[] {
  const { sampleRateHz, widthPx, distancePx = 110 } = options;
  const startS = window.startSample / sampleRateHz;
  const endS = window.endSample / sampleRateHz;
  const step = stepInSeconds(((endS - startS) * distancePx) / Math.max(1, widthPx));
  const toLabel = step >= 10 ? clockLabel : (value: number) => secondsLabel(value, decimalsOf(step));
  return multiplesWithin(startS, endS, step).map((value) => ({ value, label: toLabel(value) }));
}

/** Digits after the point of a time in seconds that tell one sample from the next, at most nine. */
export function timeDecimals(sampleRateHz: number): number {
  return Math.min(9, Math.max(3, Math.ceil(Math.log10(sampleRateHz))));
}
