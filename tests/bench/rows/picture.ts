import { rmSync } from 'node:fs';
import { join } from 'node:path';
import type { BenchRow, RowFamily } from '../kit/bench.ts';
import { short } from '../kit/figures.ts';
import { frameFigures, framesRow } from '../kit/frames.ts';
import { visitPicture } from '../kit/picture-visit.ts';
import { spreadOf } from '../kit/ratios.ts';
import { makeRepeatedRecording } from '../kit/repeated-recording.ts';
import { ServerVisit } from '../kit/server-visit.ts';

const RATE_HZ = 192_000;
const HOUR_S = 3600;
const QUICK_S = 120;
const MOST_FIRST_MS = 1000;
const MOST_P95_MS = 25;
const MEASURE_MS = 1_200_000;

export const picture: RowFamily = {
  name: 'picture',
  about: 'an hour at 192 kHz on the bench, in Chromium: first picture, panning, zooming (3 GB of disk)',
  async run(bench) {
    const durationS = bench.isQuick ? QUICK_S : HOUR_S;
    const made = makeRepeatedRecording(bench, {
      encoding: 'integer',
      bitsPerSample: 16,
      channels: 1,
      sampleRateHz: RATE_HZ,
      frames: durationS * RATE_HZ,
    });
    const dataDir = join(bench.folder, 'picture');
    const visit = await ServerVisit.begin(dataDir);
    try {
      const id = await visit.bringIn(made);
      rmSync(made.path);
      bench.say(`measuring ${durationS} s ...`);
      await visit.untilMeasured(id, MEASURE_MS);
      return rowsOf(await visitPicture(visit, id, bench.pairs), durationS);
    } finally {
      await visit.end();
      rmSync(dataDir, { recursive: true, force: true });
    }
  },
};

function rowsOf(seen: Awaited<ReturnType<typeof visitPicture>>, durationS: number): BenchRow[] {
  const [coldMs = Number.NaN, ...warmMs] = seen.firstPictureMs;
  const warm = spreadOf(warmMs.length > 0 ? warmMs : [coldMs]);
  const whole = spreadOf(seen.wholePictureMs);
  return [
    {
      what: `picture: ${short(durationS)} s at 192 kHz, from the navigation until there is a picture`,
      ours: `${short(warm.median)} ms (${short(warm.least)}-${short(warm.most)}; with an empty cache ${short(coldMs)})`,
      must: `${MOST_FIRST_MS} ms`,
      holds: warm.median < MOST_FIRST_MS,
    },
    {
      what: 'picture: until all of it is drawn from the level that fits the screen',
      ours: `${short(whole.median)} ms (${short(whole.least)}-${short(whole.most)})`,
    },
    smooth('picture: a frame while a key is held that pans', seen.panFramesMs),
    smooth('picture: a frame while the wheel zooms to samples and back to the whole', seen.zoomFramesMs),
    {
      what: 'picture: frames with nothing to show in a part of it, meanwhile',
      ours: String(seen.emptyFrames),
      must: '0',
      holds: seen.emptyFrames === 0,
    },
  ];
}

function smooth(what: string, framesMs: number[]): BenchRow {
  const row = framesRow(what, framesMs);
  return { ...row, must: `p95 ${MOST_P95_MS} ms`, holds: frameFigures(framesMs).p95Ms <= MOST_P95_MS };
}
