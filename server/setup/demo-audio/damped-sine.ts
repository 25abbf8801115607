export type DampedSine = {
  onsetSample: number;
  frequencyHz: number;
  /** Time in which the envelope falls to 1/e. */
  decayS: number;
  /** Of the envelope at the onset; the first peak is a little lower. */
  amplitude: number;
};

/** After this many decay times the envelope is 104 dB down, below the noise of every file. */
const RENDERED_DECAYS = 12;

/** Samples over which a burst is rendered. */
export function dampedSineLength(burst: DampedSine, sampleRateHz: number): number {
  return Math.ceil(RENDERED_DECAYS * burst.decayS * sampleRateHz);
}

/**
 * Adds the part of A exp(-t / tau) sin(2 pi f t), t from the onset, that falls into a block.
 * @param out block whose first sample is sample `startSample` of the recording
 */
export function addDampedSine(
  out: Float32Array,
  startSample: number,
  burst: DampedSine,
  sampleRateHz: number,
): void {
  const { onsetSample, frequencyHz, decayS, amplitude } = burst;
  const from = Math.max(startSample, onsetSample);
  const end = Math.min(startSample + out.length, onsetSample + dampedSineLength(burst, sampleRateHz));
  for (let sample = from; sample < end; sample++) {
    const seconds = (sample - onsetSample) / sampleRateHz;
    out[sample - startSample]! +=
      amplitude * Math.exp(-seconds / decayS) * Math.sin(2 * Math.PI * frequencyHz * seconds);
  }
}
