/** meyda's own number of mel bands, and of coefficients kept. */
export const MEL_BANDS = 26;
export const CEPSTRAL_COEFFICIENTS = 13;

const toMel = (hz: number) => 1125 * Math.log(1 + hz / 700);
const toHz = (mel: number) => 700 * (Math.exp(mel / 1125) - 1);

/**
 * Bins of the corners of meyda's bank of 26 triangles, of equal width in mel from 0 Hz to Nyquist: band b rises from corner b
 * to corner b + 1 and falls to corner b + 2.
 *
 * meyda keeps its bank when the sample rate changes, so that its coefficients are wrong from the second rate on: these
 * corners belong to one rate. They lie at floor((N + 1) f / fs), as in meyda; where all three fall on one bin, the band is empty.
 * @param size N, samples of a frame.
 * Source: meyda 5.6.3, utilities.ts, createMelFilterBank.
 */
export function melCorners(size: number, sampleRateHz: number): Int32Array {
  const melPerBand = toMel(sampleRateHz / 2) / (MEL_BANDS + 1);
  return Int32Array.from({ length: MEL_BANDS + 2 }, (_, i) => {
    // meyda keeps both steps in float32, which decides on which bin a corner falls.
    const hz = Math.fround(toHz(Math.fround(i * melPerBand)));
    return Math.floor(((size + 1) * hz) / sampleRateHz);
  });
}

/** The weights of one band that are not zero but for the first, for the bins from `first`. */
export interface MelBand {
  readonly first: number;
  readonly weights: Float64Array;
}

export function melBank(size: number, sampleRateHz: number): MelBand[] {
  const corners = melCorners(size, sampleRateHz);
  return Array.from({ length: MEL_BANDS }, (_, band) => {
    const [low, middle, high] = [corners[band]!, corners[band + 1]!, corners[band + 2]!];
    const weights = Float64Array.from({ length: high - low }, (_, i) =>
      low + i < middle ? i / (middle - low) : (high - low - i) / (high - middle),
    );
    return { first: low, weights };
  });
}

/**
 * Row c, band b: 2 cos(pi (b + 1/2) c / 26), so that coefficient c is the sum over the bands of this and ln(1 + energy).
 *
 * Source: the package dct 0.1.0 that meyda uses, with its scale of 2.
 */
export function cepstralCosines(): Float64Array {
  return Float64Array.from({ length: CEPSTRAL_COEFFICIENTS * MEL_BANDS }, (_, i) => {
    const coefficient = Math.floor(i / MEL_BANDS);
    return 2 * Math.cos((Math.PI / MEL_BANDS) * ((i % MEL_BANDS) + 0.5) * coefficient);
  });
}

/**
 * From power as `FrameSpectrum` scales it to |X|^2, which meyda's bands are sums of: sum(w)^2 / 4 = N^2 / 16. The logarithm
 * of 1 + energy makes the coefficients depend on this scale.
 */
export function melEnergyScale(size: number): number {
  return (size * size) / 16;
}
