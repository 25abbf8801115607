/**
 * Lowers a whole signal so far that no sample is stronger than `limit`; one that stays below is left as it is.
 *
 * @param samples full scale 1, finite; changed in place
 * @param limit above 0, full scale 1
 */
export function limitPeak(samples: Float32Array, limit: number): void {
  let peak = 0;
  for (let n = 0; n < samples.length; n++) peak = Math.max(peak, Math.abs(samples[n]!));
  if (peak <= limit) return;
  const gain = limit / peak;
  for (let n = 0; n < samples.length; n++) samples[n]! *= gain;
}

/**
 * Fades a signal in and out by half a raised cosine, so that neither end clicks.
 *
 * @param samples changed in place; a signal shorter than two fades is faded over its halves
 * @param fadeSamples length of each fade, at least 0
 */
export function fadeEnds(samples: Float32Array, fadeSamples: number): void {
  const length = Math.min(fadeSamples, samples.length >> 1);
  for (let n = 0; n < length; n++) {
    const gain = 0.5 - 0.5 * Math.cos((Math.PI * n) / length);
    samples[n]! *= gain;
    samples[samples.length - 1 - n]! *= gain;
  }
}
