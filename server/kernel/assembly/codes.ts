import { naturalLog } from './logarithm';

/** 20 / ln 10: two codes per decibel of power. */
const CODES_PER_NEPER: f32 = 8.685889638065035;

/**
 * Codes of power rows: code = (10 log10(power) + 120) / 0.5, rounded, 0 to 255. Of each `group` rows (the last may have
 * fewer) the greatest power of a bin is coded.
 *
 * A power counts as the middle of those with the same 8 leading bits of mantissa, as in the table of the server.
 * Writes up to 3 codes past the last row. @param stride floats from one row to the next.
 */
export function codes(power: usize, stride: usize, rows: usize, bins: usize, group: usize, out: usize): void {
  const rowBytes = stride << 2;
  for (let row: usize = 0; row < rows; row += group, out += bins) {
    const first = power + row * rowBytes;
    const end = first + (min(group, rows - row) - 1) * rowBytes;
    for (let b: usize = 0; b < bins; b += 4) {
      let most = v128.load(first + (b << 2));
      for (let at = first + rowBytes; at <= end; at += rowBytes) {
        most = f32x4.pmax(most, v128.load(at + (b << 2)));
      }
      v128.store_lane<i32>(out + b, codesOf(most), 0);
    }
  }
}

/** The greater one of each pair of codes into `kept`. Writes up to 15 bytes past it, and changes nothing there that counts. */
export function raiseCodes(kept: usize, codes: usize, count: usize): void {
  for (const end = kept + count; kept < end; kept += 16, codes += 16) {
    v128.store(kept, i8x16.max_u(v128.load(kept), v128.load(codes)));
  }
}

function codesOf(power: v128): v128 {
  const middle = v128.or(v128.and(power, i32x4.splat(~0x7fff)), i32x4.splat(0x4000));
  const level = f32x4.mul(naturalLog(middle), f32x4.splat(CODES_PER_NEPER));
  const words = i32x4.trunc_sat_f32x4_s(f32x4.add(level, f32x4.splat(240.5)));
  const halves = i16x8.narrow_i32x4_s(words, words);
  return i8x16.narrow_i16x8_u(halves, halves);
}
