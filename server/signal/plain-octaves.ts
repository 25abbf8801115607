import { EVEN_1, EVEN_2, ODD_1, ODD_2 } from './half-band.ts';
import {
  HALF_WINDOWS,
  WINDOW_CELLS,
  type CellAddition,
  type CellScan,
  type HalfScan,
  type OctaveArithmetic,
  type QuarterSplit,
  type UpperHalfSplit,
} from './octave-arithmetic.ts';

const COLUMNS = 8;

/**
 * The arithmetic of the octaves in plain TypeScript.
 *
 * Two splits in a row are written out as one loop: what lies between them stays in registers, and their chains of
 * dependent additions run side by side. Cost: about 17 ns per input sample for the splits of all octaves, 11 ns for sums and windows.
 */
export const plainOctaves: OctaveArithmetic = {
  floats: (length) => ({ values: new Float32Array(length) }),
  doubles: (length) => ({ values: new Float64Array(length) }),
  integers: (length) => ({ values: new Int32Array(length) }),
  splitUpperHalf,
  splitQuarters,
  addCells,
  scanCells,
  scanHalves,
};

function splitUpperHalf(split: UpperHalfSplit, from: number, quads: number, lowFrom: number): void {
  const input = split.input.values;
  const low = split.low.values;
  const lowerHalf = split.lowerHalf.values;
  const upperHalf = split.upperHalf.values;
  const s = split.state.values;
  let [xo, xe, yo, ye, zo, ze] = [s[0]!, s[1]!, s[2]!, s[3]!, s[4]!, s[5]!];
  let [uo, ue, vo, ve, wo, we] = [s[6]!, s[7]!, s[8]!, s[9]!, s[10]!, s[11]!];
  for (let n = 0; n < quads; n++) {
    const at = from + 4 * n;
    const older1 = input[at]!;
    const newer1 = input[at + 1]!;
    const older2 = input[at + 2]!;
    const newer2 = input[at + 3]!;
    const p1 = EVEN_1 * (newer1 - ye) + xe;
    const even1 = EVEN_2 * (p1 - ze) + ye;
    const q1 = ODD_1 * (older1 - yo) + xo;
    const odd1 = ODD_2 * (q1 - zo) + yo;
    const p2 = EVEN_1 * (newer2 - p1) + newer1;
    const even2 = EVEN_2 * (p2 - even1) + p1;
    const q2 = ODD_1 * (older2 - q1) + older1;
    const odd2 = ODD_2 * (q2 - odd1) + q1;
    xo = older2;
    xe = newer2;
    yo = q2;
    ye = p2;
    zo = odd2;
    ze = even2;
    low[lowFrom + 2 * n] = even1 + odd1;
    low[lowFrom + 2 * n + 1] = even2 + odd2;
    const older = even1 - odd1;
    const newer = even2 - odd2;
    const p = EVEN_1 * (newer - ve) + ue;
    const even = EVEN_2 * (p - we) + ve;
    const q = ODD_1 * (older - vo) + uo;
    const odd = ODD_2 * (q - wo) + vo;
    uo = older;
    ue = newer;
    vo = q;
    ve = p;
    wo = odd;
    we = even;
    // The octave is an upper half: its own 0 Hz lies at its upper edge, so its lower half comes out as the high one.
    upperHalf[n] = even + odd;
    lowerHalf[n] = even - odd;
  }
  s.set([xo, xe, yo, ye, zo, ze, uo, ue, vo, ve, wo, we]);
}

function splitQuarters(split: QuarterSplit, quads: number): void {
  const input = split.input.values;
  const energies = split.energies.values;
  const [lowLow, lowHigh, highLow, highHigh] = split.columns;
  const s = split.state.values;
  let [xo, xe, yo, ye, zo, ze] = [s[0]!, s[1]!, s[2]!, s[3]!, s[4]!, s[5]!];
  let [ao, ae, bo, be, co, ce] = [s[6]!, s[7]!, s[8]!, s[9]!, s[10]!, s[11]!];
  let [uo, ue, vo, ve, wo, we] = [s[12]!, s[13]!, s[14]!, s[15]!, s[16]!, s[17]!];
  for (let n = 0; n < quads; n++) {
    const at = 4 * n;
    const older1 = input[at]!;
    const newer1 = input[at + 1]!;
    const older2 = input[at + 2]!;
    const newer2 = input[at + 3]!;
    const p1 = EVEN_1 * (newer1 - ye) + xe;
    const even1 = EVEN_2 * (p1 - ze) + ye;
    const q1 = ODD_1 * (older1 - yo) + xo;
    const odd1 = ODD_2 * (q1 - zo) + yo;
    const p2 = EVEN_1 * (newer2 - p1) + newer1;
    const even2 = EVEN_2 * (p2 - even1) + p1;
    const q2 = ODD_1 * (older2 - q1) + older1;
    const odd2 = ODD_2 * (q2 - odd1) + q1;
    xo = older2;
    xe = newer2;
    yo = q2;
    ye = p2;
    zo = odd2;
    ze = even2;
    const lowOlder = even1 + odd1;
    const lowNewer = even2 + odd2;
    const g = EVEN_1 * (lowNewer - be) + ae;
    const lowEven = EVEN_2 * (g - ce) + be;
    const h = ODD_1 * (lowOlder - bo) + ao;
    const lowOdd = ODD_2 * (h - co) + bo;
    ao = lowOlder;
    ae = lowNewer;
    bo = h;
    be = g;
    co = lowOdd;
    ce = lowEven;
    const highOlder = even1 - odd1;
    const highNewer = even2 - odd2;
    const p = EVEN_1 * (highNewer - ve) + ue;
    const highEven = EVEN_2 * (p - we) + ve;
    const q = ODD_1 * (highOlder - vo) + uo;
    const highOdd = ODD_2 * (q - wo) + vo;
    uo = highOlder;
    ue = highNewer;
    vo = q;
    ve = p;
    wo = highOdd;
    we = highEven;
    const row = COLUMNS * n;
    energies[row + lowLow] = (lowEven + lowOdd) * (lowEven + lowOdd);
    energies[row + lowHigh] = (lowEven - lowOdd) * (lowEven - lowOdd);
    energies[row + highLow] = (highEven + highOdd) * (highEven + highOdd);
    energies[row + highHigh] = (highEven - highOdd) * (highEven - highOdd);
  }
  s.set([xo, xe, yo, ye, zo, ze, ao, ae, bo, be, co, ce, uo, ue, vo, ve, wo, we]);
}

function addCells({ energies, sums, gains, past }: CellAddition, from: number, to: number): void {
  const read = energies.values;
  const write = sums.values;
  const gain = gains.values;
  for (let column = 0; column < COLUMNS; column++) {
    const times = gain[column]!;
    let at = COLUMNS * (past + from) + column;
    let sum = write[at - COLUMNS]!;
    for (let row = 2 * COLUMNS * from + column; row < 2 * COLUMNS * to; row += 2 * COLUMNS, at += COLUMNS) {
      sum += (read[row]! + read[row + COLUMNS]!) * times;
      write[at] = sum;
    }
  }
}

const differences = new Float64Array(COLUMNS);

function scanCells(
  { sums, past, limits, hits }: CellScan,
  { from, to, phase, validFrom }: { from: number; to: number; phase: number; validFrom: number },
): number {
  const values = sums.values;
  const most = limits.values;
  const found = hits.values;
  let count = 0;
  for (let cell = from; cell < to; cell++) {
    const number = phase + cell + 1;
    for (let length = 0; length < WINDOW_CELLS.length; length++) {
      const cells = 2 << length;
      // A window ends at multiples of half its length.
      if ((number & ((1 << length) - 1)) !== 0 || cell + 1 - cells < validFrom) break;
      const now = COLUMNS * (past + cell);
      const then = now - COLUMNS * cells;
      for (let column = 0; column < COLUMNS; column++)
        differences[column] = values[now + column]! - values[then + column]!;
      if (exceeds(differences, most, 4 * length)) found[count++] = 8 * (cell + 1) + length;
    }
  }
  return count;
}

function exceeds(d: Float64Array, limits: Float64Array, at: number): boolean {
  const [one, two, four, eight] = [limits[at]!, limits[at + 1]!, limits[at + 2]!, limits[at + 3]!];
  const p0 = d[0]! + d[1]!;
  const p2 = d[2]! + d[3]!;
  const p4 = d[4]! + d[5]!;
  const p6 = d[6]! + d[7]!;
  const q0 = p0 + p2;
  const q4 = p4 + p6;
  if (q0 + q4 > eight || q0 > four || q4 > four || p2 + p4 > four) return true;
  if (p0 > two || p2 > two || p4 > two || p6 > two) return true;
  if (d[1]! + d[2]! > two || d[3]! + d[4]! > two || d[5]! + d[6]! > two) return true;
  for (let column = 0; column < COLUMNS; column++) if (d[column]! > one) return true;
  return false;
}

function scanHalves(
  { lowerHalf, upperHalf, hits }: HalfScan,
  range: { from: number; to: number; lowerGain: number; upperGain: number; limit: number },
): number {
  const lower = lowerHalf.values;
  const upper = upperHalf.values;
  const found = hits.values;
  const { from, to, lowerGain, upperGain, limit } = range;
  let count = 0;
  // Sums over the two and the four samples before.
  let both = 0;
  let lowerFour = 0;
  let upperFour = 0;
  for (let step = Math.max(0, from - 1); step < to; step++) {
    const n = 4 * step;
    const a = (lower[n]! * lower[n]! + lower[n + 1]! * lower[n + 1]!) * lowerGain;
    const aNext = (lower[n + 2]! * lower[n + 2]! + lower[n + 3]! * lower[n + 3]!) * lowerGain;
    const b = (upper[n]! * upper[n]! + upper[n + 1]! * upper[n + 1]!) * upperGain;
    const bNext = (upper[n + 2]! * upper[n + 2]! + upper[n + 3]! * upper[n + 3]!) * upperGain;
    const middle = a + b;
    const late = aNext + bNext;
    const lowerNow = a + aNext;
    const upperNow = b + bNext;
    if (step >= from) {
      if (both + middle > limit) found[count++] = 4 * step + HALF_WINDOWS.bothEarly;
      if (middle + late > limit) found[count++] = 4 * step + HALF_WINDOWS.bothLate;
      if (lowerFour + lowerNow > limit) found[count++] = 4 * step + HALF_WINDOWS.lower;
      if (upperFour + upperNow > limit) found[count++] = 4 * step + HALF_WINDOWS.upper;
    }
    both = late;
    lowerFour = lowerNow;
    upperFour = upperNow;
  }
  return count;
}
