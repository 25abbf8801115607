import Meyda from 'meyda';
import { kernelEngine } from '../../../server/kernel/kernel-engine.ts';
import { planFrames } from '../../../server/signal/frame-plan.ts';
import { resolvedBands } from '../../../server/signal/third-octaves.ts';
import { Scene } from '../kit/scene.ts';
import { cpuOf, writeFindings } from './write-findings.ts';

// CPU microseconds per frame of 2048 samples: all features by Meyda.extract, and by the engine. Argument: rounds.
const RATE_HZ = 192_000;
const FRAMES = 256;
const ENGINE_REPEATS = 40;
const FEATURES = [
  'rms',
  'energy',
  'zcr',
  'spectralCentroid',
  'spectralSpread',
  'spectralFlatness',
  'spectralRolloff',
  'spectralCrest',
  'powerSpectrum',
  'mfcc',
] as const;

const { long } = planFrames(RATE_HZ, FRAMES * 1024 + 2048);
const engine = kernelEngine();
const samples = engine.samples(FRAMES * long.hop + long.size);
const rows = engine.longFrames({
  grid: long,
  sampleRateHz: RATE_HZ,
  frames: samples.values.length,
  bands: resolvedBands(RATE_HZ / long.size, RATE_HZ / 2),
  capacity: FRAMES,
});
new Scene(RATE_HZ, 5).next(samples.values);
Meyda.bufferSize = long.size;
Meyda.sampleRate = RATE_HZ;

function byMeyda(): void {
  for (let frame = 1; frame <= FRAMES; frame++) {
    const from = frame * long.hop - long.hop / 2;
    Meyda.extract([...FEATURES], samples.values.subarray(from, from + long.size));
  }
}

function byEngine(): void {
  const window = { samples: samples.values, startSample: 0, endSample: samples.values.length };
  for (let repeat = 0; repeat < ENGINE_REPEATS; repeat++) rows.analyse(window, 1, 1 + FRAMES);
}

byMeyda();
byEngine();
const meydaUs: number[] = [];
const engineUs: number[] = [];
for (let round = 0; round < Number(process.argv[2]); round++) {
  meydaUs.push((await cpuOf(byMeyda)) / FRAMES);
  engineUs.push((await cpuOf(byEngine)) / (FRAMES * ENGINE_REPEATS));
}
writeFindings({ meydaUs, engineUs });
