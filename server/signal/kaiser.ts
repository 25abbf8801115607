/**
 * Kaiser window, w(t) = I0(beta sqrt(1 - t^2)) / I0(beta).
 *
 * @param t place from the middle (0) to an end (-1 or 1); 0 is returned beyond them
 * @param beta at least 0; 5.65 for a stopband near -60 dB, 8.96 near -90 dB
 * @returns 1 in the middle, 1 / I0(beta) at the ends. NaN gives NaN.
 * Source: J. F. Kaiser, "Nonrecursive digital filter design using the I0-sinh window function", 1974.
 */
export function kaiser(t: number, beta: number): number {
  if (Math.abs(t) > 1) return 0;
  return besselI0(beta * Math.sqrt(1 - t ** 2)) / besselI0(beta);
}

/** Modified Bessel function of the first kind and order 0, by its power series. */
function besselI0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-18 * sum; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}
