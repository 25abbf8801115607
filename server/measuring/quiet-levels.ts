import type { PictureQuiet, QuietLevels } from '../../shared/contract/views.ts';
import { columnsAtLevel } from '../signal/spectrogram-columns.ts';
import { readColumns, type ColumnsPlace, type ColumnsSource } from './tile-columns.ts';
import type { ViewLayout } from './view-layout.ts';

/** Columns that are looked at for one level. */
const COLUMNS = 256;
/** Kept columns lie in stretches, which are read at once. */
const STRETCHES = 8;
/** Columns of a level below 0 overlap nearly whole: more places, of few columns each, say more. */
const FINER_STRETCHES = 32;
const FINER_COLUMNS = 64;
const CODES = 256;

/**
 * What is quiet in each bin of the pictures of a channel, level by level: the median code of the bin over the quieter half of
 * up to 256 columns that are spread evenly over the recording (64 below level 0). Which half is quieter is decided by the sum of a
 * column's codes. So a hum that never stops counts as quiet, and a click does not, unless it is heard half of the time.
 */
export async function quietLevels(
  source: ColumnsSource,
  layout: ViewLayout,
  channel: number,
): Promise<QuietLevels> {
  const pictures: PictureQuiet[] = [];
  for (const { layout: picture } of layout.pictures) {
    const levels: PictureQuiet['levels'] = [];
    for (let level = -picture.finerLevels; level < picture.levels; level++) {
      const place = { band: picture.band, channel, level };
      const columns = columnsAtLevel(picture.columns, level);
      const parts: Uint8Array[] = [];
      for (const stretch of stretchesOf(columns, level))
        parts.push(await readColumns(source, layout, { ...place, ...stretch }));
      levels.push({ level, codes: quietCodes(parts, picture.bins) });
    }
    pictures.push({ band: picture.band, levels });
  }
  return { channel, pictures };
}

type Stretch = Pick<ColumnsPlace, 'firstColumn' | 'columns'>;

/** Evenly spread over a level; all of it where it is short. */
export function stretchesOf(columns: number, level: number): Stretch[] {
  const [wanted, count] = level < 0 ? [FINER_COLUMNS, FINER_STRETCHES] : [COLUMNS, STRETCHES];
  if (columns <= wanted) return [{ firstColumn: 0, columns }];
  const each = wanted / count;
  return Array.from({ length: count }, (_, index) => ({
    firstColumn: Math.floor((index * (columns - each)) / (count - 1)),
    columns: each,
  }));
}

/** The median code of each bin over the quieter half of the columns, at least one. */
export function quietCodes(parts: readonly Uint8Array[], bins: number): number[] {
  const columns = parts.flatMap((codes) =>
    Array.from({ length: codes.length / bins }, (_, column) =>
      codes.subarray(column * bins, (column + 1) * bins),
    ),
  );
  const sums = columns.map((column) => ({ column, sum: column.reduce((sum, code) => sum + code, 0) }));
  sums.sort((a, b) => a.sum - b.sum);
  const quiet = sums.slice(0, Math.ceil(sums.length / 2)).map(({ column }) => column);
  const counts = new Uint16Array(CODES);
  return Array.from({ length: bins }, (_, bin) => {
    counts.fill(0);
    for (const column of quiet) counts[column[bin]!]!++;
    return medianOf(counts, quiet.length);
  });
}

function medianOf(counts: Uint16Array, total: number): number {
  let seen = 0;
  let code = 0;
  while (code < CODES - 1 && (seen += counts[code]!) * 2 < total) code++;
  return code;
}
