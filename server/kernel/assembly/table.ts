import { naturalLog } from './logarithm';

/** 10 / ln 10. */
const DECIBELS_PER_NEPER: f32 = 4.342944819032518;
/** 10 log10 2: the level of a sine is that of twice its mean square. */
const SINE_DB: f32 = 3.010299956639812;
/** Mean square under which there is no level, as in the server. */
const SILENCE_MEAN_SQUARE: f32 = 1e-18;
/** Columns before the third octaves, of features as of the table. */
const FIRST_COLUMNS: usize = 23;

/**
 * Rows of features as rows of the table of long frames: levels in decibels, NaN where there is none, silent frames with their
 * peak alone. Both have their columns in the same order.
 *
 * Writes up to 3 floats past the last row. @param stride floats from one row of features to the next.
 */
export function tableRows(
  features: usize,
  stride: usize,
  rows: usize,
  bands: usize,
  crossingsToHz: f32,
  table: usize,
): void {
  const columns = FIRST_COLUMNS + bands;
  for (let row: usize = 0; row < rows; row++, features += stride << 2, table += columns << 2) {
    const silent = f32x4.splat(f32.NaN);
    const meanSquare = load<f32>(features, 4);
    const peak = load<f32>(features, 8);
    const peakDb: f32 = peak > 0 ? 2 * decibels(peak) : f32.NaN;
    if (!(meanSquare >= SILENCE_MEAN_SQUARE)) {
      for (let column: usize = 0; column < columns; column += 4) v128.store(table + (column << 2), silent);
      store<f32>(table, peakDb, 4);
      continue;
    }
    const levels = levelsOf(f32x4(meanSquare, load<f32>(features, 32), 1, 1));
    const rmsDb = f32x4.extract_lane(levels, 0);
    store<f32>(table, rmsDb);
    store<f32>(table, peakDb, 4);
    store<f32>(table, peakDb - rmsDb + SINE_DB, 8);
    store<f32>(table, load<f32>(features, 12) * crossingsToHz, 12);
    v128.store(table, v128.load(features, 16), 16);
    store<f32>(table, f32x4.extract_lane(levels, 1), 32);
    store<f32>(table, load<f32>(features, 32) / load<f32>(features, 36), 36);
    for (let column: usize = 10; column < FIRST_COLUMNS; column++) {
      store<f32>(table + (column << 2), load<f32>(features + (column << 2)));
    }
    for (let column = FIRST_COLUMNS; column < columns; column += 4) {
      v128.store(table + (column << 2), levelsOf(v128.load(features + (column << 2))));
    }
  }
}

/** 10 log10(2 x) of each mean square, NaN where it is none. */
function levelsOf(meanSquares: v128): v128 {
  const levels = f32x4.add(
    f32x4.mul(naturalLog(meanSquares), f32x4.splat(DECIBELS_PER_NEPER)),
    f32x4.splat(SINE_DB),
  );
  const isHeard = f32x4.ge(meanSquares, f32x4.splat(SILENCE_MEAN_SQUARE));
  return v128.bitselect(levels, f32x4.splat(f32.NaN), isHeard);
}

function decibels(x: f32): f32 {
  return f32x4.extract_lane(naturalLog(f32x4.splat(x)), 0) * DECIBELS_PER_NEPER;
}
