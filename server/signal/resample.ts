import { kaiser } from './kaiser.ts';

/** Zero crossings of the sinc on either side of its middle. */
const ZERO_CROSSINGS = 24;
const POINTS_PER_CROSSING = 512;
/** Stopband near -90 dB. */
const KAISER_BETA = 8.96;
/** Cut-off as a share of the lower of the two Nyquist frequencies, so that the stopband begins at it. */
const CUTOFF = 0.88;

export interface ResamplePlan {
  /** Input samples that pass for one output sample. */
  inputPerOutput: number;
  /** Input samples that reach into an output sample, on either side of its place. */
  reachSamples: number;
  /** Input samples from one zero crossing of the kernel to the next. */
  crossingSamples: number;
}

/**
 * How to change the rate of a signal by any ratio with a linear-phase low-pass.
 *
 * @param inputPerOutput input rate divided by output rate, above 0; above 1 the low-pass keeps what would alias out
 * @param stopCycles cycles per input sample at which the stopband begins at the latest, above 0 up to 0.5
 * @returns the plan for `resample`
 * @throws RangeError for a ratio that is not a finite number above 0, and for other `stopCycles`
 */
export function planResampling(inputPerOutput: number, stopCycles = 0.5): ResamplePlan {
  if (!Number.isFinite(inputPerOutput) || inputPerOutput <= 0) {
    throw new RangeError(`inputPerOutput: ${inputPerOutput} must be a finite number above 0`);
  }
  if (!(stopCycles > 0 && stopCycles <= 0.5)) {
    throw new RangeError(`stopCycles: ${stopCycles} must lie above 0 and not above 0.5`);
  }
  const crossingSamples = Math.max(1, inputPerOutput, 0.5 / stopCycles) / CUTOFF;
  return { inputPerOutput, crossingSamples, reachSamples: Math.ceil(ZERO_CROSSINGS * crossingSamples) };
}

export interface ResampleBlock {
  /** Input samples; those outside of it count as 0. */
  input: Float32Array;
  /** Number of the sample that `input[0]` is; may be negative. */
  inputStart: number;
  /** Number of the output sample that `output[0]` is. */
  outputStart: number;
  output: Float32Array;
}

/**
 * Fills a block of output samples by windowed-sinc interpolation.
 *
 * y[n] = (1/c) sum_k x[k] h((k - n r) / c), with r input samples per output sample, h(t) = sinc(t) kaiser(t / 24),
 * and c = max(1, r, 1 / (2 stop)) / 0.88 input samples from one zero crossing of h to the next. Blocks join without a seam.
 *
 * @param plan from `planResampling`
 * @param block `input` must hold every sample within `plan.reachSamples` of `outputStart * r` to the last output's
 *   place, as far as the signal has it; full scale 1, not NaN (a NaN spreads over the reach of the kernel)
 * Cost: 48 c multiplications for each output sample.
 * Source: J. O. Smith, "Digital Audio Resampling Home Page", 2002, the band-limited interpolation with a windowed
 *   sinc table; J. F. Kaiser, "Nonrecursive digital filter design using the I0-sinh window function", 1974.
 */
export function resample(plan: ResamplePlan, block: ResampleBlock): void {
  const { input, inputStart, outputStart, output } = block;
  const perTap = POINTS_PER_CROSSING / plan.crossingSamples;
  const gain = 1 / plan.crossingSamples;
  for (let n = 0; n < output.length; n++) {
    const place = (outputStart + n) * plan.inputPerOutput - inputStart;
    const first = Math.max(0, Math.ceil(place - plan.reachSamples));
    const last = Math.min(input.length - 1, Math.floor(place + plan.reachSamples));
    let sum = 0;
    for (let k = first; k <= last; k++) {
      const at = Math.abs(k - place) * perTap;
      const index = at | 0;
      if (index >= KERNEL.length - 1) continue;
      const left = KERNEL[index]!;
      sum += input[k]! * (left + (at - index) * (KERNEL[index + 1]! - left));
    }
    output[n] = sum * gain;
  }
}

/** Right half of the kernel; linear interpolation in it errs by less than 1e-5. */
const KERNEL = makeKernel();

function makeKernel(): Float64Array {
  const points = ZERO_CROSSINGS * POINTS_PER_CROSSING;
  return Float64Array.from({ length: points + 1 }, (_, i) => {
    const t = i / POINTS_PER_CROSSING;
    const sinc = i === 0 ? 1 : Math.sin(Math.PI * t) / (Math.PI * t);
    return sinc * kaiser(i / points, KAISER_BETA);
  });
}
