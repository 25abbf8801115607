import { rmSync } from 'node:fs';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { megabytes, short } from '../kit/figures.ts';
import { runMeasure } from '../kit/measurements.ts';
import { makeRecording, type MadeRecording, type RecordingSpec } from '../kit/recordings.ts';

type Shape = Omit<RecordingSpec, 'frames'>;

const SHAPES: readonly Shape[] = [
  { sampleRateHz: 48_000, encoding: 'integer', bitsPerSample: 16, channels: 1 },
  { sampleRateHz: 96_000, encoding: 'integer', bitsPerSample: 24, channels: 2 },
  { sampleRateHz: 192_000, encoding: 'integer', bitsPerSample: 24, channels: 8 },
  { sampleRateHz: 500_000, encoding: 'float', bitsPerSample: 32, channels: 2 },
  { sampleRateHz: 1_000_000, encoding: 'integer', bitsPerSample: 16, channels: 1 },
  { sampleRateHz: 1_000_000, encoding: 'integer', bitsPerSample: 16, channels: 8 },
];

export const shapes: RowFamily = {
  name: 'shapes',
  about: 'npm run measure on one to eight channels, 48 kHz to 1 MHz',
  async run(bench) {
    const samples = bench.isQuick ? 2 ** 24 : 2 ** 27;
    const rows: BenchRow[] = [];
    for (const shape of SHAPES) {
      const recording = makeRecording(bench, { ...shape, frames: samples / shape.channels });
      rows.push(await measuredRow(bench, recording, nameOf(shape)));
      rmSync(recording.path);
    }
    return rows;
  },
};

function nameOf({ sampleRateHz, encoding, bitsPerSample, channels }: Shape): string {
  const count = channels === 1 ? '1 channel' : `${channels} channels`;
  return `${sampleRateHz / 1000} kHz, ${bitsPerSample}-bit ${encoding}, ${count}`;
}

/** Figures without a limit: how they grow is what matters. */
async function measuredRow(bench: Bench, recording: MadeRecording, name: string): Promise<BenchRow> {
  const { wallS, cpuS, peakMb } = await runMeasure(bench, recording, { workers: 2 });
  const perSampleNs = (cpuS / (recording.frames * recording.channels)) * 1e9;
  return {
    what: `npm run measure, two workers: ${name}`,
    ours: `${short(wallS)} s, CPU ${short(cpuS)} s, ${megabytes(peakMb)}`,
    ratio: `${short(perSampleNs)} ns/sample`,
  };
}
