/** One instant on both clocks: a clap, a flash. */
export interface SyncInstant {
  /** Seconds since the first picture of the film. */
  videoS: number;
  runTimeNs: number;
}

/** Where a film lies on the clock of its run. */
export interface FilmClock {
  /** Run time of its first picture. */
  runOffsetNs: number;
  /** How much faster its clock runs than that of the run. */
  clockPpm: number;
}

export interface FilmSync extends FilmClock {
  /** What the marks say of the drift; `null` where one mark says nothing. */
  drift: { measuredPpm: number; uncertaintyPpm: number; isApplied: boolean } | null;
}

/** Speed of sound in dry air at 20 degrees C, m/s (common practice). */
const soundMPerS = 343.2;
/** What a camera may be taken to do where its film does not say. */
export const usualFramesPerS = 30;
/** A clock that is off by more than this is not a clock: one of the marks is at another instant. */
export const mostPlausiblePpm = 2000;

export function filmSecondsAt(runTimeNs: number, { runOffsetNs, clockPpm }: FilmClock): number {
  return ((runTimeNs - runOffsetNs) / 1e9) * (1 + clockPpm * 1e-6);
}

export function filmRunTimeNs(videoS: number, { runOffsetNs, clockPpm }: FilmClock): number {
  return runOffsetNs + (videoS * 1e9) / (1 + clockPpm * 1e-6);
}

/** How far two clocks are apart after a time, in milliseconds: 20 ppm are 72 ms in an hour. */
export function driftMs(ppm: number, seconds: number): number {
  return ppm * 1e-3 * seconds;
}

/** How much later a sound comes than the picture of what made it, in milliseconds. */
export function soundLagMs(distanceM: number): number {
  return (distanceM / soundMPerS) * 1000;
}

/** The instant of something seen lies anywhere in its picture: half a picture to either side of its middle. */
export function frameUncertaintyS(framesPerS: number | null): number {
  return 0.5 / (framesPerS ?? usualFramesPerS);
}

/**
 * The clock that fits the marks best. The drift is applied only where it stands out of what pictures can tell: two marks
 * a minute apart at 30 pictures a second leave it uncertain by some hundred ppm, more than any camera is off.
 */
export function syncFromMarks(marks: readonly SyncInstant[], framesPerS: number | null): FilmSync | null {
  const [first] = marks;
  if (first === undefined) return null;
  const rateOff = slopeOf(marks);
  const spreadS = spreadOf(marks);
  const drift =
    rateOff === null
      ? null
      : toDrift(rateOff * 1e6, (Math.SQRT2 * frameUncertaintyS(framesPerS) * 1e6) / spreadS);
  const clockPpm = drift?.isApplied ? drift.measuredPpm : 0;
  const offsets = marks.map(
    ({ videoS, runTimeNs }) => runTimeNs - filmRunTimeNs(videoS, { runOffsetNs: 0, clockPpm }),
  );
  return { runOffsetNs: Math.round(mean(offsets)), clockPpm, drift };
}

function toDrift(measuredPpm: number, uncertaintyPpm: number) {
  const isPlausible = Math.abs(measuredPpm) <= mostPlausiblePpm;
  return { measuredPpm, uncertaintyPpm, isApplied: isPlausible && Math.abs(measuredPpm) > uncertaintyPpm };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function spreadOf(marks: readonly SyncInstant[]): number {
  const times = marks.map(({ runTimeNs }) => runTimeNs);
  return (Math.max(...times) - Math.min(...times)) / 1e9;
}

/** Least squares of how far the film is ahead over run time; `null` where all marks are at one instant. */
function slopeOf(marks: readonly SyncInstant[]): number | null {
  const at = marks.map(({ runTimeNs }) => runTimeNs / 1e9);
  const middle = mean(at);
  const ahead = marks.map(({ videoS, runTimeNs }) => videoS - runTimeNs / 1e9);
  const meanAhead = mean(ahead);
  const variance = at.reduce((sum, value) => sum + (value - middle) ** 2, 0);
  if (variance === 0) return null;
  return (
    at.reduce((sum, value, one) => sum + (value - middle) * ((ahead[one] ?? 0) - meanAhead), 0) / variance
  );
}

/** How far the marks lie from the fitted clock, at most, in seconds of the film. */
export function worstMissS(marks: readonly SyncInstant[], clock: FilmClock): number {
  return Math.max(0, ...marks.map((mark) => Math.abs(filmSecondsAt(mark.runTimeNs, clock) - mark.videoS)));
}
