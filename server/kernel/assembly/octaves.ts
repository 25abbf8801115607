/**
 * The arithmetic of the detector's octaves, equal to the bit with `server/signal/plain-octaves.ts`: the same operations in
 * the same order. The odd and the even chain of a splitter run side by side in the two lanes of a vector.
 */

/** Bytes of one splitter's state: of input, first and second section, a pair (odd, even) each. */
const SPLITTER_BYTES: usize = 48;
const ROW_BYTES: usize = 64;

function odds(a: v128, b: v128): v128 {
  return v128.shuffle<i64>(a, b, 0, 2);
}

function evens(a: v128, b: v128): v128 {
  return v128.shuffle<i64>(a, b, 1, 3);
}

function section(factor: v128, input: v128, before: v128, output: v128): v128 {
  return f64x2.add(f64x2.mul(factor, f64x2.sub(input, output)), before);
}

/**
 * Float32 `input` of 4 samples a step to float32 `low` of 2, and a sample of each half.
 * @param factors of the first and the second section, a pair (odd, even) each. @param state of 2 splitters.
 */
export function splitUpperHalf(
  input: usize,
  quads: usize,
  low: usize,
  lowerHalf: usize,
  upperHalf: usize,
  state: usize,
  factors: usize,
): void {
  const first = v128.load(factors);
  const second = v128.load(factors, 16);
  let x = v128.load(state);
  let y = v128.load(state, 16);
  let z = v128.load(state, 32);
  let u = v128.load(state, 48);
  let v = v128.load(state, 64);
  let w = v128.load(state, 80);
  for (const end = input + (quads << 4); input < end; input += 16) {
    const samples = v128.load(input);
    const x1 = f64x2.promote_low_f32x4(samples);
    const x2 = f64x2.promote_low_f32x4(v128.shuffle<i64>(samples, samples, 1, 0));
    const y1 = section(first, x1, x, y);
    const z1 = section(second, y1, y, z);
    const y2 = section(first, x2, x1, y1);
    const z2 = section(second, y2, y1, z1);
    x = x2;
    y = y2;
    z = z2;
    const odd = odds(z1, z2);
    const even = evens(z1, z2);
    v128.store64_lane(low, f32x4.demote_f64x2_zero(f64x2.add(even, odd)), 0);
    const high = f64x2.sub(even, odd);
    const highFirst = section(first, high, u, v);
    w = section(second, highFirst, v, w);
    u = high;
    v = highFirst;
    const turned = v128.shuffle<i64>(w, w, 1, 0);
    v128.store64_lane(upperHalf, f64x2.add(turned, w), 0);
    v128.store64_lane(lowerHalf, f64x2.sub(turned, w), 0);
    low += 8;
    upperHalf += 8;
    lowerHalf += 8;
  }
  v128.store(state, x);
  v128.store(state, y, 16);
  v128.store(state, z, 32);
  v128.store(state, u, 48);
  v128.store(state, v, 64);
  v128.store(state, w, 80);
}

/**
 * Float64 `input` of 4 samples a step to a row of energies, of which four columns are written.
 * @param state of 3 splitters: of the input, of its lower and of its upper half.
 */
export function splitQuarters(
  input: usize,
  quads: usize,
  energies: usize,
  lowLow: usize,
  lowHigh: usize,
  highLow: usize,
  highHigh: usize,
  state: usize,
  factors: usize,
): void {
  const first = v128.load(factors);
  const second = v128.load(factors, 16);
  let x = v128.load(state);
  let y = v128.load(state, 16);
  let z = v128.load(state, 32);
  let a = v128.load(state, SPLITTER_BYTES);
  let b = v128.load(state, SPLITTER_BYTES + 16);
  let c = v128.load(state, SPLITTER_BYTES + 32);
  let u = v128.load(state, 2 * SPLITTER_BYTES);
  let v = v128.load(state, 2 * SPLITTER_BYTES + 16);
  let w = v128.load(state, 2 * SPLITTER_BYTES + 32);
  for (const end = input + (quads << 5); input < end; input += 32, energies += ROW_BYTES) {
    const x1 = v128.load(input);
    const x2 = v128.load(input, 16);
    const y1 = section(first, x1, x, y);
    const z1 = section(second, y1, y, z);
    const y2 = section(first, x2, x1, y1);
    const z2 = section(second, y2, y1, z1);
    x = x2;
    y = y2;
    z = z2;
    const odd = odds(z1, z2);
    const even = evens(z1, z2);
    const low = f64x2.add(even, odd);
    const lowFirst = section(first, low, a, b);
    c = section(second, lowFirst, b, c);
    a = low;
    b = lowFirst;
    const high = f64x2.sub(even, odd);
    const highFirst = section(first, high, u, v);
    w = section(second, highFirst, v, w);
    u = high;
    v = highFirst;
    const quarterOdd = odds(c, w);
    const quarterEven = evens(c, w);
    const lows = f64x2.add(quarterEven, quarterOdd);
    const highs = f64x2.sub(quarterEven, quarterOdd);
    const lowSquares = f64x2.mul(lows, lows);
    const highSquares = f64x2.mul(highs, highs);
    v128.store64_lane(energies + (lowLow << 3), lowSquares, 0);
    v128.store64_lane(energies + (highLow << 3), lowSquares, 1);
    v128.store64_lane(energies + (lowHigh << 3), highSquares, 0);
    v128.store64_lane(energies + (highHigh << 3), highSquares, 1);
  }
  v128.store(state, x);
  v128.store(state, y, 16);
  v128.store(state, z, 32);
  v128.store(state, a, SPLITTER_BYTES);
  v128.store(state, b, SPLITTER_BYTES + 16);
  v128.store(state, c, SPLITTER_BYTES + 32);
  v128.store(state, u, 2 * SPLITTER_BYTES);
  v128.store(state, v, 2 * SPLITTER_BYTES + 16);
  v128.store(state, w, 2 * SPLITTER_BYTES + 32);
}

/** Two rows of `energies` to a row of `sums`, `cells` of them; the row before the first one is read. */
export function addOctaveCells(energies: usize, cells: usize, sums: usize, gains: usize): void {
  const end = sums + cells * ROW_BYTES;
  for (let column: usize = 0; column < ROW_BYTES; column += 16) {
    const gain = v128.load(gains + column);
    let sum = v128.load(sums + column - ROW_BYTES);
    let from = energies + column;
    for (let at = sums + column; at < end; at += ROW_BYTES, from += 2 * ROW_BYTES) {
      const energy = f64x2.add(v128.load(from), v128.load(from, ROW_BYTES));
      sum = f64x2.add(sum, f64x2.mul(energy, gain));
      v128.store(at, sum);
    }
  }
}
