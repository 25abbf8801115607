import { defaultDetectorSettings } from './detector-settings.ts';

/** What a detector that begins anew needs beyond its learning to know the noise as one that has run for long. */
const { learningS, floorMemoryS, longestBurstS } = defaultDetectorSettings;
const MOST_LEARNING_SAMPLES = 4_000_000;
/** Overlapping bursts are decided together, with what comes right after them. */
const GROUP_S = 0.5;

/** Samples before a stretch from which a detector has to run, so that it finds there what one long run finds. */
export function detectorLeadInSamples(sampleRateHz: number): number {
  const learning = Math.min(MOST_LEARNING_SAMPLES, learningS * sampleRateHz);
  return Math.ceil(learning + (floorMemoryS + longestBurstS + GROUP_S) * sampleRateHz);
}

/** Samples after a stretch up to which it has to go on, so that bursts at the end of it are measured whole. */
export function detectorTailSamples(sampleRateHz: number): number {
  return Math.ceil((longestBurstS + GROUP_S) * sampleRateHz);
}
