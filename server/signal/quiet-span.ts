/** Least and greatest sample of equal steps of a channel. */
export interface LevelCourse {
  startSample: number;
  samplesPerPoint: number;
  minimum: ArrayLike<number>;
  maximum: ArrayLike<number>;
}

/** Half open. */
export interface QuietSpan {
  startSample: number;
  endSample: number;
}

/** A step that swings so much more than the mean of its run has a click in it: 8 dB. */
const CLICK_RATIO = 10 ** (8 / 20);
/** Neighbours that swing no more than this over the span's mean are as quiet: 2 dB. */
const AS_QUIET_RATIO = 10 ** (2 / 20);
/** How far a span may grow beyond the wanted length. */
const MOST_LENGTHS = 4;

/**
 * A span that shows the noise of a recording: the quietest of about the wanted length, without clicks in it.
 *
 * The level of a step is half of its swing, (maximum - minimum) / 2, so that an offset counts nothing. Of all runs of steps of the wanted
 * length without digital silence the one with the lowest mean of squared levels wins; runs in which a step stands 8 dB over their mean have
 * a click and are taken only where there are no others. The winner then grows on both sides, up to four lengths, as long as steps stay
 * within 2 dB of its mean.
 *
 * @param course steps of a channel, full scale 1; a last step may be shorter. NaN counts as silence.
 * @param wantedSamples length, at least 1; a shorter recording is taken whole
 * @returns `null` where nothing but digital silence, or nothing at all, is there
 * Cost: one walk over the steps with a window. Source: common practice; no standard defines it.
 */
export function findQuietSpan(course: LevelCourse, wantedSamples: number): QuietSpan | null {
  const levels = Float64Array.from(course.minimum, (low, n) =>
    Math.max(0, (course.maximum[n]! - low) / 2 || 0),
  );
  const wanted = Math.max(1, Math.round(wantedSamples / course.samplesPerPoint));
  for (let count = Math.min(wanted, levels.length); count >= 1; count = Math.floor(count / 2)) {
    const first = quietestRun(levels, count);
    if (first !== null) return toSpan(course, grown(levels, first, count));
  }
  return null;
}

/** First step of the quietest run, or `null` where each has digital silence in it. */
function quietestRun(levels: Float64Array, count: number): number | null {
  let best: { first: number; meanPower: number; hasClick: boolean } | undefined;
  let power = 0;
  let silent = 0;
  for (let n = 0; n < levels.length; n++) {
    power += levels[n]! ** 2;
    if (levels[n] === 0) silent += 1;
    if (n >= count) {
      power -= levels[n - count]! ** 2;
      if (levels[n - count] === 0) silent -= 1;
    }
    const first = n - count + 1;
    if (first < 0 || silent > 0) continue;
    const meanPower = Math.max(0, power / count);
    if (best && !best.hasClick && meanPower >= best.meanPower) continue;
    const hasClick = loudest(levels, first, count) > CLICK_RATIO * Math.sqrt(meanPower);
    if (!best || !hasClick || meanPower < best.meanPower) best = { first, meanPower, hasClick };
  }
  return best?.first ?? null;
}

function loudest(levels: Float64Array, first: number, count: number): number {
  let most = 0;
  for (let n = first; n < first + count; n++) most = Math.max(most, levels[n]!);
  return most;
}

interface Run {
  first: number;
  end: number;
}

function grown(levels: Float64Array, first: number, count: number): Run {
  let power = 0;
  for (let n = first; n < first + count; n++) power += levels[n]! ** 2;
  const most = AS_QUIET_RATIO * Math.sqrt(power / count);
  const isQuiet = (n: number) => levels[n] !== undefined && levels[n]! > 0 && levels[n]! <= most;
  const run = { first, end: first + count };
  let hasGrown = true;
  while (hasGrown && run.end - run.first < MOST_LENGTHS * count) {
    hasGrown = false;
    if (isQuiet(run.first - 1)) {
      run.first -= 1;
      hasGrown = true;
    }
    if (isQuiet(run.end)) {
      run.end += 1;
      hasGrown = true;
    }
  }
  return run;
}

function toSpan({ startSample, samplesPerPoint }: LevelCourse, { first, end }: Run): QuietSpan {
  return {
    startSample: startSample + first * samplesPerPoint,
    endSample: startSample + end * samplesPerPoint,
  };
}
