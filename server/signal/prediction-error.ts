/** Keeps the equations solvable where a lead is a pure tone: noise of a millionth of its power is thought into it. */
const REGULAR_SHARE = 1e-6;
const LEAST_POWER = 1e-30;

/**
 * Coefficients of the filter that predicts a stretch of sound from its own past, by the autocorrelation method.
 *
 * @param samples N samples, mean taken off; any unit.
 * @param order P, at least 0 and below N.
 * @returns a[0..P] with a[0] = 1: e[n] = sum of a[p] x[n - p] is what could not be predicted. Silence gives [1, 0, ...].
 * NaN in the samples gives NaN. Cost: N P + P^2.
 * Source: J. Durbin, The fitting of time-series models, Review of the International Statistical Institute 28 (1960) 233.
 */
export function predictionFilter(samples: Float64Array, order: number): Float64Array {
  const lags = autocorrelation(samples, order);
  const filter = new Float64Array(order + 1);
  filter[0] = 1;
  let error = lags[0]! * (1 + REGULAR_SHARE);
  if (error < LEAST_POWER) return filter;
  for (let p = 1; p <= order; p++) {
    let sum = lags[p]!;
    for (let k = 1; k < p; k++) sum += filter[k]! * lags[p - k]!;
    const reflection = -sum / error;
    const before = filter.slice(0, p);
    for (let k = 1; k < p; k++) filter[k] = before[k]! + reflection * before[p - k]!;
    filter[p] = reflection;
    error *= 1 - reflection * reflection;
  }
  return filter;
}

function autocorrelation(samples: Float64Array, order: number): Float64Array {
  const lags = new Float64Array(order + 1);
  for (let lag = 0; lag <= order; lag++) {
    let sum = 0;
    for (let n = lag; n < samples.length; n++) sum += samples[n]! * samples[n - lag]!;
    lags[lag] = sum / samples.length;
  }
  return lags;
}

/** What the filter could not predict; the first P samples, which have too little past, are left out (N - P values). */
export function predictionError(samples: Float64Array, filter: Float64Array): Float64Array {
  const order = filter.length - 1;
  const error = new Float64Array(Math.max(0, samples.length - order));
  for (let n = 0; n < error.length; n++) {
    let sum = 0;
    for (let p = 0; p <= order; p++) sum += filter[p]! * samples[n + order - p]!;
    error[n] = sum;
  }
  return error;
}
