import { readdirSync, statSync } from 'node:fs';
import { basename, join } from 'node:path';
import { z } from 'zod';
import type { Bench, BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { runMeasure } from '../kit/measurements.ts';
import { askProgram } from '../kit/programs.ts';
import { spreadOf } from '../kit/ratios.ts';
import { mainRecording, makeRecording, type MadeRecording } from '../kit/recordings.ts';

const MOST_SHARE = 0.12;
const MOST_TILE_MS = 10;
const tilesSchema = z.array(z.object({ band: z.string(), level: z.number(), cpuMs: z.array(z.number()) }));

export const views: RowFamily = {
  name: 'views',
  about: 'size of the stored views, and tiles made on demand',
  async run(bench) {
    const recording = mainRecording(bench);
    const viewsDir = await measureViews(bench, recording);
    return [
      sizeRow(recording, viewsDir),
      ...(await tileRows(bench, recording, viewsDir)),
      ...(await tileRowsOfManyChannels(bench)),
    ];
  },
};

async function measureViews(bench: Bench, recording: MadeRecording): Promise<string> {
  const folder = join(bench.folder, 'kept-views');
  await runMeasure(bench, recording, { workers: 2, viewsDir: folder });
  return join(folder, basename(recording.path));
}

function sizeRow({ dataBytes }: MadeRecording, viewsDir: string): BenchRow {
  const bytes = readdirSync(viewsDir).reduce((sum, name) => sum + statSync(join(viewsDir, name)).size, 0);
  const share = bytes / dataBytes;
  return {
    what: 'stored views, candidates included, against the samples of 192 kHz 24-bit',
    ours: `${short(bytes / 1e6)} MB`,
    peer: `${short(dataBytes / 1e6)} MB`,
    ratio: `${(100 * share).toFixed(2)} %`,
    must: `${100 * MOST_SHARE} %`,
    reachable: '10 %',
    holds: share <= MOST_SHARE,
  };
}

async function tileRows(bench: Bench, recording: MadeRecording, viewsDir: string): Promise<BenchRow[]> {
  const tiles = await askTiles(bench, recording, viewsDir);
  return tiles.map(({ band, level, cpuMs }) => {
    const { median, most } = spreadOf(cpuMs);
    const isFinest = level === 0;
    return {
      what: `${isFinest ? 'finest' : 'next'} ${band} tile of 256 frames on demand, CPU`,
      ours: `${short(median)} ms (at most ${short(most)})`,
      must: `${MOST_TILE_MS} ms`,
      reachable: isFinest ? '1.4 ms' : '',
      holds: median <= MOST_TILE_MS,
    };
  });
}

/** The dearest a viewer can ask for: the samples of all channels have to be read for one. */
async function tileRowsOfManyChannels(bench: Bench): Promise<BenchRow[]> {
  const layout = { encoding: 'integer', bitsPerSample: 24, channels: 8 } as const;
  const recording = makeRecording(bench, { ...layout, sampleRateHz: 192_000, frames: 2 ** 20 });
  const tiles = await askTiles(bench, recording, await measureViews(bench, recording));
  const slowest = tiles.map(({ band, level, cpuMs }) => ({ band, level, ...spreadOf(cpuMs) }));
  slowest.sort((a, b) => b.median - a.median);
  const { band, level, median, most } = slowest[0]!;
  return [
    {
      what: `the dearest tile of a recording of 8 channels (${band}, level ${level}), CPU`,
      ours: `${short(median)} ms (at most ${short(most)})`,
    },
  ];
}

function askTiles(bench: Bench, { path }: MadeRecording, viewsDir: string) {
  return askProgram(bench, 'tile-speed', [path, viewsDir, bench.isQuick ? '20' : '100'], tilesSchema);
}
