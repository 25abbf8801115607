import { detectorBlockSamples, learningSamples } from './detector-plan.ts';
import { defaultDetectorSettings } from './detector-settings.ts';

/** Overlapping bursts are decided together, with what comes right after them. */
const GROUP_S = 0.5;

/**
 * Samples before a stretch from which a detector has to run, so that it finds there what one long run finds: it learns the noise, its
 * floors and its count of bursts forget what was before.
 *
 * A multiple of the power of two up to half a second, after which all that is counted in blocks begins anew: in a stretch that
 * begins at such a place blocks are cut and floors are read where the long run does.
 */
export function detectorLeadInSamples(sampleRateHz: number): number {
  const settings = defaultDetectorSettings;
  const { floorMemoryS, longestBurstS, sureMemoryS } = settings;
  const memory = (floorMemoryS + longestBurstS + GROUP_S + sureMemoryS) * sampleRateHz;
  const step = Math.max(
    detectorBlockSamples(sampleRateHz, settings),
    2 ** Math.floor(Math.log2(sampleRateHz / 2)),
  );
  return step * Math.ceil((learningSamples(sampleRateHz, settings) + memory) / step);
}

/** Samples after a stretch up to which it has to go on, so that bursts at the end of it are measured whole. */
export function detectorTailSamples(sampleRateHz: number): number {
  return Math.ceil((defaultDetectorSettings.longestBurstS + GROUP_S) * sampleRateHz);
}
