import { parseArgs } from 'node:util';
import { openKernelOctaves } from '../../server/kernel/kernel-octaves.ts';
import { createDetector } from '../../server/signal/detector.ts';
import type { DetectedCandidate } from '../../shared/contract/measurement.ts';
import { compareWithTruth } from '../server/signal/click-truth.ts';
import { clicksOver, humAndNoise, type SceneOptions } from '../server/signal/synthetic-clicks.ts';

// Prints how well the detector finds clicks of known onset, and what a sample costs.
// Run: npx tsx tests/bench/detector-accuracy.ts [--quick] [--first 7] [--rate 48000]

/** Seconds with clicks, and of hum and noise alone. */
const RATES = [
  { sampleRateHz: 48_000, seconds: 60, aloneS: 600 },
  { sampleRateHz: 192_000, seconds: 40, aloneS: 600 },
  { sampleRateHz: 500_000, seconds: 24, aloneS: 150 },
  { sampleRateHz: 1_000_000, seconds: 14, aloneS: 100 },
] as const;
const QUICK_SHARE = 0.15;
const MOST_SAMPLES_ALONE = 12e6;

type Range = readonly [number, number];
const CASES: readonly { cycles: Range; snrDb: Range }[] = [
  { cycles: [15, 60], snrDb: [15, 40] },
  { cycles: [15, 60], snrDb: [15, 15] },
  { cycles: [15, 60], snrDb: [10, 15] },
  { cycles: [15, 60], snrDb: [5, 5] },
  { cycles: [8, 15], snrDb: [10, 15] },
  { cycles: [60, 200], snrDb: [5, 5] },
];

function bandsAt(sampleRateHz: number): (readonly [string, Range])[] {
  const audible = ['4-16 kHz', [4000, 16_000]] as const;
  if (sampleRateHz < 100_000) return [audible];
  return [audible, [`25-${0.4e-3 * sampleRateHz} kHz`, [25_000, 0.4 * sampleRateHz]]];
}

function writeLine(text: string): void {
  process.stdout.write(`${text}\n`);
}

interface Detected {
  found: DetectedCandidate[];
  cpuUs: number;
}

function detect(samples: Float32Array, sampleRateHz: number): Detected {
  const context = {
    fullScaleV: null,
    preampGainDb: null,
    observableLowHz: 0,
    observableHighHz: 0.45 * sampleRateHz,
  };
  const octaves = openKernelOctaves();
  const before = process.cpuUsage();
  const { arithmetic } = octaves;
  const detector = createDetector({ sampleRateHz, channel: 0, arithmetic, context });
  for (let from = 0; from < samples.length; from += 65_536)
    detector.push(samples.subarray(from, from + 65_536));
  const found = detector.finish();
  const cpuUs = process.cpuUsage(before).user;
  octaves.close();
  return { found, cpuUs };
}

const costOf = (cpuUs: number, samples: number) => `${((1000 * cpuUs) / samples).toFixed(0)} ns a sample`;

function printClicks(label: string, background: Float32Array, options: SceneOptions): void {
  const { samples, clicks } = clicksOver(background, options);
  const { found, cpuUs } = detect(samples, options.sampleRateHz);
  const { recall, precision, medianErrorUs } = compareWithTruth(found, clicks, options.sampleRateHz);
  const figures = `recall ${recall.toFixed(3)}  precision ${precision.toFixed(3)}  onset ${medianErrorUs.toFixed(1)} us`;
  const count = `n ${String(clicks.length).padStart(3)}`;
  writeLine(`${label.padEnd(44)} ${count}  ${figures}   ${costOf(cpuUs, samples.length)}`);
}

/** In stretches that memory holds, each with a beginning of its own. */
function printAlone(sampleRateHz: number, seconds: number, firstSeed: number): void {
  const pieces = Math.ceil((seconds * sampleRateHz) / MOST_SAMPLES_ALONE);
  const pieceS = seconds / pieces;
  let count = 0;
  let cpuUs = 0;
  for (let piece = 0; piece < pieces; piece++) {
    const samples = humAndNoise({ sampleRateHz, seconds: pieceS, seed: firstSeed + piece });
    const detected = detect(samples, sampleRateHz);
    count += detected.found.length;
    cpuUs += detected.cpuUs;
  }
  const cost = costOf(cpuUs, pieces * pieceS * sampleRateHz);
  const label = `${sampleRateHz / 1000} kHz, hum and noise alone`;
  writeLine(`${label.padEnd(44)} ${count} candidates in ${Math.round(pieces * pieceS)} s   ${cost}`);
}

function printRate(sampleRateHz: number, seconds: number, firstSeed: number): void {
  const background = humAndNoise({ sampleRateHz, seconds, seed: firstSeed });
  for (const [name, frequencyHz] of bandsAt(sampleRateHz)) {
    const label = `${sampleRateHz / 1000} kHz, ${name}`;
    const base = { sampleRateHz, seconds, ratePerSecond: 15, frequencyHz };
    for (const [index, { cycles, snrDb }] of CASES.entries()) {
      const options = { ...base, snrDb, cycles, seed: firstSeed + 100 + index };
      printClicks(`${label}, ${cycles.join('-')} cycles, ${snrDb.join('-')} dB`, background, options);
    }
    printClicks(`${label}, two clicks 1-3 ms apart`, background, {
      ...base,
      seed: firstSeed + 200,
      frequencyHz: [Math.max(6000, frequencyHz[0]), frequencyHz[1]],
      snrDb: [20, 30],
      cycles: [8, 20],
      ratePerSecond: 10,
      longestDecayS: 0.001,
      followedAfterS: [0.001, 0.003],
    });
  }
}

const { values } = parseArgs({
  options: {
    quick: { type: 'boolean', default: false },
    first: { type: 'string', default: '7' },
    rate: { type: 'string' },
  },
});
const share = values.quick ? QUICK_SHARE : 1;
const firstSeed = Number(values.first);
for (const { sampleRateHz, seconds, aloneS } of RATES) {
  if (values.rate !== undefined && Number(values.rate) !== sampleRateHz) continue;
  printRate(sampleRateHz, share * seconds, firstSeed);
  printAlone(sampleRateHz, share * aloneS, firstSeed + 1000);
}
