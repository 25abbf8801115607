import { tileLayout } from '../../../server/measuring/view-layout.ts';
import { readTile } from '../../../server/measuring/view-reader.ts';
import { FIRST_STORED_LEVELS } from '../../../server/signal/spectrogram-columns.ts';
import { withFileSource } from '../../../server/store/file-source.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import type { PictureLayout } from '../../../shared/contract/views.ts';
import { cpuOf, writeFindings } from './write-findings.ts';

// CPU milliseconds of tiles made on demand. Arguments: file, folder of its views, tiles of each level.
const [filePath = '', viewsDir = '', count = '20'] = process.argv.slice(2);
const header = await withFileSource(filePath, readWavHeader);
const { pictures } = tileLayout(header.format);
const WARM_UP = 3;

/** Whole tiles, spread over the recording. */
function places(layout: PictureLayout, level: number): number[] {
  const whole = Math.max(1, Math.floor(layout.columns / 4 ** level / layout.columnsPerTile));
  return Array.from({ length: WARM_UP + Number(count) }, (_, index) => (index * 7919) % whole);
}

async function tilesOf(layout: PictureLayout, level: number) {
  const { band } = layout;
  const each: number[] = [];
  for (const tile of places(layout, level)) {
    each.push(
      (await cpuOf(() => readTile({ filePath, viewsDir, header, channel: 0, band, level, tile }))) / 1000,
    );
  }
  return { band, level, cpuMs: each.slice(WARM_UP) };
}

const found = [];
for (const layout of pictures) {
  for (let level = 0; level < Math.min(layout.levels, FIRST_STORED_LEVELS[layout.band]); level++) {
    found.push(await tilesOf(layout, level));
  }
}
writeFindings(found);
