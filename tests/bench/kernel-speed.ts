import Meyda from 'meyda';
import { kernelEngine } from '../../server/kernel/kernel-engine.ts';
import type { FrameEngine } from '../../server/signal/frame-engine.ts';
import { bandBins, planFrames } from '../../server/signal/frame-plan.ts';
import { packageEngine } from '../../server/signal/package-engine.ts';
import { thirdOctavesWithin } from '../../server/signal/third-octaves.ts';

// Prints CPU nanoseconds per sample of both engines, and of Meyda.extract. Run: npx tsx tests/bench/kernel-speed.ts
const RATE_HZ = 192_000;
const SAMPLES = 1 << 18;
const FRAMES = 1 << 30;
const RUNS = 15;

const samples = new Float32Array(SAMPLES);
for (let n = 0, state = 1; n < SAMPLES; n++) {
  state = (Math.imul(1664525, state) + 1013904223) >>> 0;
  samples[n] = 0.02 * ((state >>> 8) / 2 ** 24 - 0.5) + 0.2 * Math.sin(n * 0.31);
}

/** Second best of some runs: the best may be luck, the others share the machine. */
function nanosecondsPerSample(work: () => void, count: number): number {
  work();
  const times = Array.from({ length: RUNS }, () => {
    const before = process.cpuUsage();
    work();
    const { user, system } = process.cpuUsage(before);
    return (user + system) / count;
  });
  return 1000 * times.sort((a, b) => a - b)[1]!;
}

function report(name: string, work: () => void, count = SAMPLES): void {
  process.stdout.write(
    `${name.padEnd(60)} ${nanosecondsPerSample(work, count).toFixed(2).padStart(8)} ns/sample\n`,
  );
}

const REPEATS = 8;
function measure(engine: FrameEngine): void {
  const { long, short } = planFrames(RATE_HZ, FRAMES);
  const own = engine.samples(SAMPLES);
  const longCount = SAMPLES / long.hop - 4;
  const shortCount = SAMPLES / short.hop - 4;
  const bins = bandBins('ultrasonic', short.size, RATE_HZ);
  const longFrames = engine.longFrames({
    grid: long,
    sampleRateHz: RATE_HZ,
    frames: FRAMES,
    bands: thirdOctavesWithin(890, RATE_HZ / 2),
    capacity: longCount,
  });
  const shortFrames = engine.shortFrames({
    grid: short,
    frames: FRAMES,
    firstBin: bins.first,
    endBin: bins.end,
    capacity: shortCount,
  });
  const cells = engine.cellSummer(SAMPLES / 256);
  const blocks = engine.blockSummer(48, Math.floor(SAMPLES / 48));
  const raw = engine.bytes(SAMPLES * 3);
  const decode = engine.decoder({ encoding: 'integer', bitsPerSample: 24, channels: 1 }, SAMPLES * 3);
  own.values.set(samples);
  raw.values.forEach((_, i) => (raw.values[i] = (i * 7919) & 255));
  const window = { samples: own.values, startSample: 0, endSample: SAMPLES };
  const audible = bandBins('audible', long.size, RATE_HZ);
  const times = (work: () => void) => () => {
    for (let i = 0; i < REPEATS; i++) work();
  };
  const total = SAMPLES * REPEATS;
  const name = engine.name;
  report(
    `${name}: long frames, features`,
    times(() => longFrames.analyse(window, 1, 1 + longCount)),
    total,
  );
  report(
    `${name}: long frames, codes of the greatest of 4`,
    times(() => longFrames.encode({ firstRow: 0, endRow: longCount }, audible, 4)),
    total,
  );
  report(
    `${name}: short frames, power`,
    times(() => shortFrames.analyse(window, 1, 1 + shortCount)),
    total,
  );
  report(
    `${name}: short frames, codes of the greatest of 4`,
    times(() => shortFrames.encode({ firstRow: 0, endRow: shortCount }, bins, 4)),
    total,
  );
  report(
    `${name}: cells`,
    times(() => cells(own.values, { from: 0, to: SAMPLES, startSample: 0 })),
    total,
  );
  report(
    `${name}: sums of 48`,
    times(() => blocks(own.values, 0, Math.floor(SAMPLES / 48))),
    total,
  );
  report(
    `${name}: decoding 24 bits`,
    times(() => decode(raw.values, [own.values])),
    total,
  );
}

measure(kernelEngine());
measure(packageEngine());

const FEATURES = [
  'rms',
  'energy',
  'zcr',
  'spectralCentroid',
  'spectralSpread',
  'spectralFlatness',
  'spectralRolloff',
  'mfcc',
] as const;
Meyda.bufferSize = 2048;
Meyda.sampleRate = RATE_HZ;
const MEYDA_FRAMES = 64;
report(
  'Meyda.extract of 8 features',
  () => {
    for (let f = 0; f < MEYDA_FRAMES; f++)
      Meyda.extract([...FEATURES], samples.subarray(f * 1024, f * 1024 + 2048));
  },
  MEYDA_FRAMES * 1024,
);
