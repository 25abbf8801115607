/** Changed whenever the same samples could give other candidates. */
export const detectorVersion = 'band-split-4';

/** All that decides what the detector finds; stored with its results. */
export interface DetectorSettings {
  /** Lowest frequency looked at; at low rates a sixteenth of the rate. */
  readonly lowestHz: number;
  /** Highest frequency looked at, as a share of the sample rate. */
  readonly highestShareOfRate: number;
  /** Candidates per second that steady noise alone may give, over all bands. */
  readonly chanceRateHz: number;
  /** Share of the bursts about that may be chance where weaker ones are believed. */
  readonly chanceShare: number;
  /** Time before a place over which bursts are counted for that. */
  readonly sureMemoryS: number;
  /** A burst counts there where noise gives such more rarely than this, in candidates per second. */
  readonly sureRateHz: number;
  /** Longest time over which energy is summed. */
  readonly longestWindowS: number;
  /** Quiet time that ends a burst. */
  readonly quietGapS: number;
  /** A burst that lasts longer is cut, and the floor learns again. */
  readonly longestBurstS: number;
  /** Time over which the floor is the median. */
  readonly floorMemoryS: number;
  /** Noise that is read before the first decision. */
  readonly learningS: number;
  /** Rise of energy that begins a new burst inside another one. */
  readonly stepDb: number;
  /** Least rise at an onset. */
  readonly onsetGateDb: number;
  /** Onsets nearer to each other are one. */
  readonly shortestSeparationS: number;
}

export const defaultDetectorSettings: DetectorSettings = {
  lowestHz: 1000,
  highestShareOfRate: 0.45,
  chanceRateHz: 1 / 600,
  chanceShare: 0.08,
  sureMemoryS: 3,
  sureRateHz: 0.1,
  longestWindowS: 0.02,
  quietGapS: 0.0005,
  longestBurstS: 0.1,
  floorMemoryS: 1,
  learningS: 0.5,
  stepDb: 4,
  onsetGateDb: 1.5,
  shortestSeparationS: 0.0006,
};
