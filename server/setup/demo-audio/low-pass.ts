/** Gives the next `count` samples of a signal. */
export type NextSamples = (count: number) => Float32Array;

/** 4 n + 1, so that each half is a whole number of pairs. */
const TAPS = 509;
/** Kaiser window for 80 dB: the edge is about 0.01 of the sample rate wide. */
const BETA = 7.857;

/**
 * The same signal with everything above `edgeHz` taken away, noise included, and no delay: the filter runs half its length ahead.
 * Source: Kaiser (1974), window method; Oppenheim and Schafer, Discrete-Time Signal Processing, 7.5.3.
 */
export function lowPassed(next: NextSamples, edgeHz: number, sampleRateHz: number): NextSamples {
  const taps = lowPassTaps(edgeHz / sampleRateHz);
  let history = new Float32Array(TAPS - 1);
  const filter = (input: Float32Array): Float32Array => {
    const joined = new Float32Array(history.length + input.length);
    joined.set(history);
    joined.set(input, history.length);
    history = joined.slice(joined.length - history.length);
    return convolve(joined, taps, input.length);
  };
  filter(next((TAPS - 1) / 2));
  return (count) => filter(next(count));
}

/** Symmetric taps: each of the first half serves two samples. */
function convolve(joined: Float32Array, taps: Float64Array, count: number): Float32Array {
  const out = new Float32Array(count);
  const middle = (TAPS - 1) / 2;
  const centre = taps[middle]!;
  for (let i = 0; i < count; i++) {
    const last = i + TAPS - 1;
    let sum = centre * joined[i + middle]!;
    let odd = 0;
    // Two sums, so that one addition need not wait for the other.
    for (let k = 0; k < middle; k += 2) {
      sum += taps[k]! * (joined[i + k]! + joined[last - k]!);
      odd += taps[k + 1]! * (joined[i + k + 1]! + joined[last - k - 1]!);
    }
    out[i] = sum + odd;
  }
  return out;
}

/** Taps of linear phase; gain 1 at 0 Hz. */
function lowPassTaps(edge: number): Float64Array {
  const middle = (TAPS - 1) / 2;
  const taps = Float64Array.from({ length: TAPS }, (_, k) => {
    const x = k - middle;
    const ideal = x === 0 ? 2 * edge : Math.sin(2 * Math.PI * edge * x) / (Math.PI * x);
    return ideal * besselI0(BETA * Math.sqrt(1 - (x / middle) ** 2));
  });
  const sum = taps.reduce((total, tap) => total + tap, 0);
  return taps.map((tap) => tap / sum);
}

/** Modified Bessel function of the first kind, order 0, by its power series (Abramowitz and Stegun 9.6.12). */
function besselI0(x: number): number {
  let term = 1;
  let sum = 1;
  for (let k = 1; term > 1e-12 * sum; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}
