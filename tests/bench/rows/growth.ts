import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { megabytes, seconds, short } from '../kit/figures.ts';
import { runMeasure } from '../kit/measurements.ts';
import { alternate, medianOf, spreadOf } from '../kit/ratios.ts';
import { makeRecording, ultrasonicRecording, type MadeRecording } from '../kit/recordings.ts';
import type { Bench } from '../kit/bench.ts';
import type { ProgramResult } from '../kit/programs.ts';

/** Of the shortest; long enough that the same extractors describe its frames as those of the others. */
const SEGMENTS = 0.625;
const MOST_MEMORY_GROWTH = 1.1;
const MOST_SLOPE_GROWTH = 1.15;

export const growth: RowFamily = {
  name: 'growth',
  about: 'time and memory of npm run measure at 4 and 16 times the length',
  async run(bench) {
    const once = recordingOf(bench, 1);
    const four = recordingOf(bench, 4);
    const sixteen = recordingOf(bench, 16);
    const measure = (recording: MadeRecording) => () => runMeasure(bench, recording, { workers: 1 });
    const runs = await alternate(bench.pairs, {
      once: measure(once),
      four: measure(four),
      sixteen: measure(sixteen),
    });
    return [memoryRow(runs), timeRow(runs)];
  },
};

/** Of 192 kHz and 24 bits; for a quick look, of 48 kHz and 16 bits. */
function recordingOf(bench: Bench, times: number): MadeRecording {
  if (!bench.isQuick) return ultrasonicRecording(bench, SEGMENTS * times);
  const layout = { encoding: 'integer', bitsPerSample: 16, channels: 1 } as const;
  return makeRecording(bench, { ...layout, sampleRateHz: 48_000, frames: SEGMENTS * times * 2 ** 22 });
}

type Runs = Record<'once' | 'four' | 'sixteen', ProgramResult[]>;

function memoryRow({ once, four, sixteen }: Runs): BenchRow {
  const peak = (results: ProgramResult[]) => medianOf(results.map(({ peakMb }) => peakMb));
  const grown = peak(sixteen) / peak(once);
  return {
    what: 'memory at 16 times the length, one worker',
    ours: [once, four, sixteen].map((results) => megabytes(peak(results))).join(', '),
    ratio: `${grown.toFixed(3)} x`,
    must: `${MOST_MEMORY_GROWTH} x`,
    reachable: '1.04 x',
    holds: grown <= MOST_MEMORY_GROWTH,
  };
}

/** From 4 to 16 times the length there are four times as many samples as from 1 to 4 times. */
function timeRow({ once, four, sixteen }: Runs): BenchRow {
  const cpu = (results: ProgramResult[]) => results.map(({ cpuS }) => cpuS);
  const [one, middle, most] = [cpu(once), cpu(four), cpu(sixteen)];
  const slopes = spreadOf(
    one.map((value, run) => (most[run]! - middle[run]!) / (4 * (middle[run]! - value))),
  );
  return {
    what: 'CPU time per sample from 4 to 16 times the length, to that from 1 to 4 times',
    ours: [one, middle, most].map(seconds).join(', '),
    ratio: `${short(slopes.median)} (${short(slopes.least)}-${short(slopes.most)})`,
    must: `${MOST_SLOPE_GROWTH}`,
    reachable: '1.03',
    holds: slopes.median <= MOST_SLOPE_GROWTH,
  };
}
