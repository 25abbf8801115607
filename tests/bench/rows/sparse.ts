import { readFileSync, rmSync } from 'node:fs';
import { basename, join } from 'node:path';
import { z } from 'zod';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { megabytes, short } from '../kit/figures.ts';
import { runMeasure } from '../kit/measurements.ts';
import { makeRecording, type MadeRecording } from '../kit/recordings.ts';

const LAYOUT = { encoding: 'float', bitsPerSample: 64, channels: 1, sampleRateHz: 192_000 } as const;
const SAMPLE_BYTES = 8;
const HOLE_FRAMES = Math.ceil(2 ** 32 / SAMPLE_BYTES);
const SOUND_FRAMES = 4 * 192_000;
const MOST_MB = 150;
const candidateSchema = z.object({ onsetSample: z.number() });

export const sparse: RowFamily = {
  name: 'sparse',
  about: 'npm run measure on a file of more than 4 GB, most of it a hole',
  async run(bench) {
    const frames = HOLE_FRAMES + SOUND_FRAMES;
    const recording = makeRecording(bench, { ...LAYOUT, frames, holeFrames: HOLE_FRAMES });
    const row = await sparseRow(bench, recording);
    rmSync(recording.path);
    return [row];
  },
};

async function sparseRow(bench: Bench, recording: MadeRecording): Promise<BenchRow> {
  const viewsDir = join(bench.folder, 'sparse-views');
  const { wallS, cpuS, peakMb } = await runMeasure(bench, recording, { workers: 2, viewsDir });
  const beyond = onsetsIn(join(viewsDir, basename(recording.path))).filter((onset) => onset >= HOLE_FRAMES);
  return {
    what: `npm run measure, two workers: RF64 of ${short(recording.dataBytes / 1e9)} GB, sound in its last 4 s alone`,
    ours: `${short(wallS)} s, CPU ${short(cpuS)} s, ${megabytes(peakMb)}, ${beyond.length} candidates there`,
    must: `${megabytes(MOST_MB)}, candidates`,
    holds: peakMb <= MOST_MB && beyond.length > 0,
  };
}

function onsetsIn(viewsDir: string): number[] {
  const lines = readFileSync(join(viewsDir, 'candidates.ndjson'), 'utf8').split('\n');
  return lines
    .filter((line) => line !== '')
    .map((line) => candidateSchema.parse(JSON.parse(line)).onsetSample);
}
