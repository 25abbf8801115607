/** A stretch of one octave in which energy stands over the floor by more than chance explains. */
export interface ActiveRegion {
  readonly startSample: number;
  readonly endSample: number;
  /** The window that stands out most. */
  readonly bestStartSample: number;
  readonly bestEndSample: number;
  readonly lowHz: number;
  readonly highHz: number;
  /** Lower edge of the octave. */
  readonly octaveLowHz: number;
  /** Log-likelihood by which the best window departs from noise. */
  readonly evidence: number;
  /** Values summed in the best window. */
  readonly degrees: number;
  /** Mean power of the best window over the floor there. */
  readonly powerRatio: number;
  /** Noise power per hertz about the best window, full scale squared. */
  readonly noisePerHz: number;
  /** It lasted longer than a burst: a change of the background, which the floor then learned. */
  readonly cut: boolean;
  /** It begins soon after one that was cut, while the background may still be changing. */
  readonly continues: boolean;
}
