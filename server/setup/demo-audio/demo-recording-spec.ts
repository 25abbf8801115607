import type { DemoMetadata } from './metadata-chunks.ts';

export type PhaseName =
  | 'supercooled-liquid'
  | 'nucleation'
  | 'recalescence'
  | 'dendritic-growth'
  | 'cellular-growth'
  | 'planar-growth'
  | 'eutectic-growth'
  | 'coarsening'
  | 'cooling-solid'
  | 'not-visible';

/** A class of the default label scheme. */
export type BurstKind =
  'crack' | 'twin' | 'detachment' | 'bubble' | 'vessel-tick' | 'handling' | 'electrical';

type Range = readonly [low: number, high: number];

/** Bursts of one kind that come at random through a phase; each draws its values from the ranges. */
export type BurstFamily = {
  kind: BurstKind;
  ratePerS: number;
  frequencyHz: Range;
  decayUs: Range;
  /** Peak of the envelope, dB re full scale; above 0 it is cut off in the file. Weak ones are more frequent. */
  peakDb: Range;
};

export type DemoPhase = { name: PhaseName; startSeconds: number; endSeconds: number; bursts: BurstFamily[] };

/** Everything from which a demo recording is made, sample by sample the same on every machine. */
export type DemoRecordingSpec = {
  key: string;
  fileName: string;
  /** One sentence: what it shows. */
  about: string;
  seed: number;
  sampleRateHz: number;
  encoding: 'integer' | 'float';
  bitsPerSample: number;
  channels: number;
  extensible?: boolean;
  seconds: number;
  phases: DemoPhase[];
  /** Levels of the rms, dB re 1. */
  noise: { pinkDb: number; whiteDb: number };
  /** Peak levels of steady lines, dB re full scale. */
  hum: { frequencyHz: number; levelDb: number }[];
  /** Everything above is taken away, noise included, as lossy compression or an older sample rate does. */
  bandLimitHz?: number;
  /** How every burst reaches the channels after the first. */
  otherChannels?: { delaySamples: number; levelDb: number };
  metadata: DemoMetadata[];
};
