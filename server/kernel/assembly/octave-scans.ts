/** The detector's looks for windows over a limit; what is added is added in the order of `server/signal/plain-octaves.ts`. */

const ROW_BYTES: usize = 64;
const LENGTHS: i32 = 5;
const LIMIT_BYTES: usize = 32;

/**
 * Windows that end with the cells [from, to), the cell at `sums` being the first of the block.
 * @param phase number of that cell. @param validFrom no window begins before this cell.
 * @param hits gets 8 x the cell behind the window + length. @returns their number.
 */
export function scanOctaveCells(
  sums: usize,
  limits: usize,
  hits: usize,
  from: i32,
  to: i32,
  phase: i32,
  validFrom: i32,
): i32 {
  const begin = hits;
  for (let cell = from; cell < to; cell++) {
    const number = phase + cell + 1;
    const now = sums + cell * <i32>ROW_BYTES;
    for (let length = 0; length < LENGTHS; length++) {
      const cells = 2 << length;
      if ((number & ((1 << length) - 1)) !== 0 || cell + 1 - cells < validFrom) break;
      if (exceeds(now, now - cells * <i32>ROW_BYTES, limits + length * <i32>LIMIT_BYTES)) {
        store<i32>(hits, 8 * (cell + 1) + length);
        hits += 4;
      }
    }
  }
  return (<i32>(hits - begin)) >> 2;
}

/** Whether the difference of two rows is over a limit in some window of 1, 2, 4 or 8 columns. */
function exceeds(now: usize, then: usize, limits: usize): bool {
  const d01 = f64x2.sub(v128.load(now), v128.load(then));
  const d23 = f64x2.sub(v128.load(now, 16), v128.load(then, 16));
  const d45 = f64x2.sub(v128.load(now, 32), v128.load(then, 32));
  const d67 = f64x2.sub(v128.load(now, 48), v128.load(then, 48));
  const d13 = v128.shuffle<i64>(d01, d23, 1, 3);
  const d57 = v128.shuffle<i64>(d45, d67, 1, 3);
  const p02 = f64x2.add(v128.shuffle<i64>(d01, d23, 0, 2), d13);
  const p46 = f64x2.add(v128.shuffle<i64>(d45, d67, 0, 2), d57);
  const between = f64x2.add(d13, v128.shuffle<i64>(d23, d45, 0, 2));
  const last = f64x2.add(d57, d67);
  const p04 = v128.shuffle<i64>(p02, p46, 0, 2);
  const q04 = f64x2.add(p04, v128.shuffle<i64>(p02, p46, 1, 3));
  const middle = f64x2.add(v128.shuffle<i64>(p02, p02, 1, 1), p46);
  const all = f64x2.add(q04, v128.shuffle<i64>(q04, q04, 1, 0));
  const one = v128.load64_splat(limits);
  const two = v128.load64_splat(limits, 8);
  const four = v128.load64_splat(limits, 16);
  const eight = v128.load64_splat(limits, 24);
  const ones = v128.or(
    v128.or(f64x2.gt(d01, one), f64x2.gt(d23, one)),
    v128.or(f64x2.gt(d45, one), f64x2.gt(d67, one)),
  );
  const twos = v128.or(v128.or(f64x2.gt(p02, two), f64x2.gt(p46, two)), f64x2.gt(between, two));
  // Of these, the second lane is no window.
  const singles = v128.or(f64x2.gt(last, two), f64x2.gt(middle, four));
  const wide = v128.or(f64x2.gt(q04, four), f64x2.gt(all, eight));
  return v128.any_true(v128.or(v128.or(ones, twos), wide)) || i64x2.extract_lane(singles, 0) !== 0;
}

/**
 * Windows of the samples of both halves that end in the steps [from, to) of four samples.
 * @param hits gets 4 x step + window. @returns their number.
 */
export function scanOctaveHalves(
  lower: usize,
  upper: usize,
  hits: usize,
  from: i32,
  to: i32,
  lowerGain: f64,
  upperGain: f64,
  limit: f64,
): i32 {
  const begin = hits;
  const most = f64x2.splat(limit);
  const lowerGains = f64x2.splat(lowerGain);
  const upperGains = f64x2.splat(upperGain);
  let before = f64x2.splat(0);
  let four = f64x2.splat(0);
  for (let step = max(0, from - 1); step < to; step++) {
    const at = (<usize>step) << 5;
    const a = f64x2.mul(pairSquares(lower + at), lowerGains);
    const b = f64x2.mul(pairSquares(upper + at), upperGains);
    const both = f64x2.add(a, b);
    const now = f64x2.add(v128.shuffle<i64>(a, b, 0, 2), v128.shuffle<i64>(a, b, 1, 3));
    if (step >= from) {
      const bothOver = f64x2.gt(f64x2.add(v128.shuffle<i64>(before, both, 1, 2), both), most);
      const halfOver = f64x2.gt(f64x2.add(four, now), most);
      if (v128.any_true(v128.or(bothOver, halfOver))) {
        hits = note(hits, 4 * step, i64x2.bitmask(bothOver) | (i64x2.bitmask(halfOver) << 2));
      }
    }
    before = both;
    four = now;
  }
  return (<i32>(hits - begin)) >> 2;
}

/** Of four samples: squares of the first two added, and of the last two. */
function pairSquares(at: usize): v128 {
  const first = v128.load(at);
  const last = v128.load(at, 16);
  const firstSquares = f64x2.mul(first, first);
  const lastSquares = f64x2.mul(last, last);
  return f64x2.add(
    v128.shuffle<i64>(firstSquares, lastSquares, 0, 2),
    v128.shuffle<i64>(firstSquares, lastSquares, 1, 3),
  );
}

function note(hits: usize, number: i32, windows: i32): usize {
  for (let window = 0; window < 4; window++) {
    if (((windows >> window) & 1) === 0) continue;
    store<i32>(hits, number + window);
    hits += 4;
  }
  return hits;
}
