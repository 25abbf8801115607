/** Cells of a histogram as `shared` with the server: the upper bits of a float32, four for each doubling of power from 2^-64. */
const CELL_SHIFT = 21;
const FIRST_CELL = 63 << 2;
const CELLS = 288;

/** A mark: the class in the lower bits, this one for a row that goes into the histograms; less than 0 leaves the row out. */
const COUNTED_MARK = 1 << 8;
const CLASS_BITS = COUNTED_MARK - 1;
/** As many points as a line of the cache holds. */
const POINTS_AT_ONCE: usize = 16;

/**
 * Takes spectra of `points` powers, a multiple of 16, into three tables: the greatest of each point (f32), the sums of each class
 * (f64) and the histogram of each point (u32, `CELLS` each).
 *
 * All rows of a few points come first, so that their histograms stay near.
 * @param marks one i32 for each of the `count` rows.
 */
export function accumulate(
  rows: usize,
  strideBytes: usize,
  marks: usize,
  count: usize,
  points: usize,
  maximum: usize,
  sums: usize,
  counts: usize,
): void {
  const marksEnd = marks + (count << 2);
  const classBytes = points << 3;
  for (let p: usize = 0; p < points; p += POINTS_AT_ONCE) {
    let power = rows + (p << 2);
    for (let at = marks; at < marksEnd; at += 4, power += strideBytes) {
      const mark = load<i32>(at);
      if (mark < 0) continue;
      addPoints(power, maximum + (p << 2), sums + usize(mark & CLASS_BITS) * classBytes + (p << 3));
      if ((mark & COUNTED_MARK) !== 0) countPoints(power, counts + p * (CELLS << 2));
    }
  }
}

function addPoints(power: usize, maximum: usize, sums: usize): void {
  for (const end = power + (POINTS_AT_ONCE << 2); power < end; power += 16, maximum += 16, sums += 32) {
    const x = v128.load(power);
    v128.store(maximum, f32x4.pmax(v128.load(maximum), x));
    const upper = v128.shuffle<i64>(x, x, 1, 0);
    v128.store(sums, f64x2.add(v128.load(sums), f64x2.promote_low_f32x4(x)));
    v128.store(sums, f64x2.add(v128.load(sums, 16), f64x2.promote_low_f32x4(upper)), 16);
  }
}

function countPoints(power: usize, counts: usize): void {
  for (const end = power + (POINTS_AT_ONCE << 2); power < end; power += 16, counts += CELLS << 4) {
    count(v128.load(power), counts);
  }
}

/** Raises one cell in the histograms of four points. */
function count(power: v128, counts: usize): void {
  let cell = i32x4.sub(i32x4.shr_u(power, CELL_SHIFT), i32x4.splat(FIRST_CELL));
  cell = i32x4.min_s(i32x4.max_s(cell, i32x4.splat(0)), i32x4.splat(CELLS - 1));
  const bytes = i32x4.shl(cell, 2);
  raise(counts + i32x4.extract_lane(bytes, 0));
  raise(counts + (CELLS << 2) + i32x4.extract_lane(bytes, 1));
  raise(counts + (CELLS << 3) + i32x4.extract_lane(bytes, 2));
  raise(counts + 3 * (CELLS << 2) + i32x4.extract_lane(bytes, 3));
}

function raise(at: usize): void {
  store<u32>(at, load<u32>(at) + 1);
}

/** Means of `group` neighbouring powers; the first of several without bin 0, whose mean was removed. */
export function pool(power: usize, group: usize, points: usize, out: usize): void {
  for (let p: usize = 0; p < points; p++) {
    let sum: f32 = 0;
    let k: usize = p == 0 && group > 1 ? 1 : 0;
    const used = f32(group - k);
    for (; k < group; k++) sum += load<f32>(power + (k << 2));
    store<f32>(out + (p << 2), sum / used);
    power += group << 2;
  }
}
