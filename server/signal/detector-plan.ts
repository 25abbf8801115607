import { blockSamplesOf } from './band-energy.ts';
import type { DetectorSettings } from './detector-settings.ts';

/** The floors follow the noise from block to block. */
const BLOCK_S = 0.04;
const MOST_BLOCK_SAMPLES = 8192;
const MOST_LEARNING_SAMPLES = 4_000_000;

/** Octaves below half the rate that are watched: down to the lowest frequency. */
export function watchedOctaves(sampleRateHz: number, { lowestHz }: DetectorSettings): number {
  return Math.max(1, Math.round(Math.log2(sampleRateHz / 2 / Math.min(lowestHz, sampleRateHz / 16))));
}

/** Samples of the blocks that a detector works in, whatever it is given: a power of two. */
export function detectorBlockSamples(sampleRateHz: number, settings: DetectorSettings): number {
  const octaves = watchedOctaves(sampleRateHz, settings);
  const wanted = Math.min(MOST_BLOCK_SAMPLES, BLOCK_S * sampleRateHz);
  return blockSamplesOf(octaves, 2 ** Math.ceil(Math.log2(wanted)));
}

/** Samples from which a detector learns the noise before it begins: whole blocks. */
export function learningSamples(sampleRateHz: number, settings: DetectorSettings): number {
  const block = detectorBlockSamples(sampleRateHz, settings);
  return block * Math.ceil(Math.min(MOST_LEARNING_SAMPLES, settings.learningS * sampleRateHz) / block);
}
