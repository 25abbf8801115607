import { createDetector } from '../../server/signal/detector.ts';
import { compareWithTruth } from '../server/signal/click-truth.ts';
import { clickScene, type SceneOptions } from '../server/signal/synthetic-clicks.ts';

// Prints how well the detector finds clicks of known onset, and how fast it reads. Run: npx tsx tests/bench/detector-accuracy.ts
const RATES: readonly (readonly [sampleRateHz: number, seconds: number])[] = [
  [48_000, 20],
  [192_000, 12],
  [500_000, 8],
  [1_000_000, 6],
];
const CASES: readonly (readonly [cycles: readonly [number, number], snrDb: readonly [number, number]])[] = [
  [
    [15, 60],
    [15, 40],
  ],
  [
    [15, 60],
    [15, 15],
  ],
  [
    [15, 60],
    [10, 15],
  ],
  [
    [15, 60],
    [5, 5],
  ],
  [
    [8, 15],
    [10, 15],
  ],
  [
    [60, 200],
    [5, 5],
  ],
];

function bandsAt(sampleRateHz: number): (readonly [string, readonly [number, number]])[] {
  const audible = ['4-16 kHz', [4000, 16_000]] as const;
  if (sampleRateHz < 100_000) return [audible];
  return [audible, [`25-${0.4e-3 * sampleRateHz} kHz`, [25_000, 0.4 * sampleRateHz]]];
}

function writeLine(text: string): void {
  process.stdout.write(`${text}\n`);
}

function print(label: string, options: SceneOptions): void {
  const { samples, clicks } = clickScene(options);
  const { sampleRateHz } = options;
  const context = {
    fullScaleV: null,
    preampGainDb: null,
    observableLowHz: 0,
    observableHighHz: 0.45 * sampleRateHz,
  };
  const before = process.cpuUsage();
  const detector = createDetector({ sampleRateHz, channel: 0, context });
  for (let from = 0; from < samples.length; from += 65_536)
    detector.push(samples.subarray(from, from + 65_536));
  const found = detector.finish();
  const rate = samples.length / process.cpuUsage(before).user;
  const speed = `${rate.toFixed(1)} Msamples per CPU second`;
  if (clicks.length === 0) {
    writeLine(`${label.padEnd(44)} ${found.length} candidates in ${options.seconds} s   ${speed}`);
    return;
  }
  const { recall, precision, medianErrorUs } = compareWithTruth(found, clicks, sampleRateHz);
  const figures = `recall ${recall.toFixed(3)}  precision ${precision.toFixed(3)}  onset ${medianErrorUs.toFixed(1)} us`;
  writeLine(`${label.padEnd(44)} n ${String(clicks.length).padStart(3)}  ${figures}   ${speed}`);
}

for (const [sampleRateHz, seconds] of RATES) {
  for (const [name, frequencyHz] of bandsAt(sampleRateHz)) {
    const label = `${sampleRateHz / 1000} kHz, ${name}`;
    const base = { sampleRateHz, seconds, seed: 7, ratePerSecond: 15, frequencyHz };
    for (const [cycles, snrDb] of CASES) {
      print(`${label}, ${cycles.join('-')} cycles, ${snrDb.join('-')} dB`, { ...base, snrDb, cycles });
    }
    const pair = { longestDecayS: 0.001, followedAfterS: [0.001, 0.003] } as const;
    const low = Math.max(6000, frequencyHz[0]);
    const overlap = {
      frequencyHz: [low, frequencyHz[1]],
      snrDb: [20, 30],
      cycles: [8, 20],
      ratePerSecond: 10,
    } as const;
    print(`${label}, two clicks 1-3 ms apart`, { ...base, ...overlap, ...pair });
  }
  const alone = { seed: 9, ratePerSecond: 0, snrDb: [0, 0], frequencyHz: [1, 2], cycles: [1, 1] } as const;
  print(`${sampleRateHz / 1000} kHz, hum and noise alone`, {
    sampleRateHz,
    seconds: Math.min(600, 30e6 / sampleRateHz),
    ...alone,
  });
}
