const PERIODS_PER_SMOOTHING = 2;
const RISE_RATIO = 4;
const NOISE_RATIO = 16;

export interface RiseOptions {
  /** Samples [from, to) are looked at; the burst begins at `from`. */
  readonly from: number;
  readonly to: number;
  readonly sampleRateHz: number;
  /** The lower edge of the band: rises are told apart at two of its periods. */
  readonly lowHz: number;
  /** Mean square of the noise; 0 where unknown. */
  readonly noisePower: number;
}

/**
 * How often the energy of a burst rises: its beginning, and each time the smoothed energy grows by 6 dB and more over its least value since the
 * rise before, while it stands 12 dB over the noise. 1 for a burst that only dies away; what overlaps too closely to be parted gives more.
 *
 * The smoothing is an exponential mean over two periods of the lower edge. Cost: one pass. NaN counts as no rise.
 */
export function countRises(samples: Float32Array, options: RiseOptions): number {
  const { from, to, sampleRateHz, lowHz, noisePower } = options;
  const take = 1 - Math.exp(-lowHz / (PERIODS_PER_SMOOTHING * sampleRateHz));
  const clear = NOISE_RATIO * noisePower;
  let mean = noisePower;
  let least = Infinity;
  let peak = 0;
  let rises = 1;
  for (let n = from; n < Math.min(to, samples.length); n++) {
    const value = samples[n]!;
    mean += take * (value * value - mean);
    if (least === Infinity) {
      // Still on the first rise, until the energy has fallen by as much as it would have to grow again.
      if (mean > peak) peak = mean;
      else if (mean * RISE_RATIO < peak) least = mean;
    } else if (mean < least) {
      least = mean;
    } else if (mean > RISE_RATIO * least && mean > clear) {
      rises += 1;
      peak = mean;
      least = Infinity;
    }
  }
  return rises;
}
