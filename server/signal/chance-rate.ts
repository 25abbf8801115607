/**
 * How often noise alone gives damped sines, and how often that may be so beside the bursts about.
 */
const AT_STATISTIC = 38;
const RATE_PER_WIDTH = 6e-7;
const SLOPE = 0.42;

/**
 * Rate per second at which steady noise gives a damped sine whose statistic is at least this, in an octave of width W:
 * W x 1e-6 x exp(-0.42 (T - 38)), fitted to the detector's own findings in an hour of white noise at 48 kHz, T from 30 to 44;
 * below 30 an upper bound. A single place and shape would have exp(-T / 2).
 */
export function sineRateHz(statistic: number, widthHz: number): number {
  return widthHz * RATE_PER_WIDTH * Math.exp(-SLOPE * (statistic - AT_STATISTIC));
}

/** The statistic that steady noise reaches at a rate. */
export function sineStatistic(rateHz: number, widthHz: number): number {
  return AT_STATISTIC - Math.log(rateHz / (widthHz * RATE_PER_WIDTH)) / SLOPE;
}
