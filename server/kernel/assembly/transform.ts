/**
 * Power spectra of four frames at once, one in each lane, so that no step but the first mixes lanes.
 *
 * A real frame of N samples is transformed as M = N / 2 complex numbers, 32 bytes each: four real parts, four imaginary
 * parts. Source: M. C. Pease, J. ACM 15 (1968) 252 and T. G. Stockham's autosort form, radix 4; the split of the real
 * transform as in Numerical Recipes, 12.3.
 */

/** Bytes of the twiddles of one radix-4 butterfly: w, w^2, w^3. */
const TWIDDLE_BYTES: usize = 24;

/** x = (samples - mean) * window of four frames, four lanes per sample. */
export function windowLanes(
  a: usize,
  b: usize,
  c: usize,
  d: usize,
  means: usize,
  window: usize,
  size: usize,
  out: usize,
): void {
  const mean = v128.load(means);
  const rest = v128.load(means, 16);
  for (const end = window + (size << 2); window < end; window += 16, out += 64) {
    const x = v128.load(a);
    const y = v128.load(b);
    const z = v128.load(c);
    const w = v128.load(d);
    a += 16;
    b += 16;
    c += 16;
    d += 16;
    const xyLow = v128.shuffle<i32>(x, y, 0, 4, 1, 5);
    const xyHigh = v128.shuffle<i32>(x, y, 2, 6, 3, 7);
    const zwLow = v128.shuffle<i32>(z, w, 0, 4, 1, 5);
    const zwHigh = v128.shuffle<i32>(z, w, 2, 6, 3, 7);
    const first = f32x4.sub(f32x4.sub(v128.shuffle<i64>(xyLow, zwLow, 0, 2), mean), rest);
    const second = f32x4.sub(f32x4.sub(v128.shuffle<i64>(xyLow, zwLow, 1, 3), mean), rest);
    const third = f32x4.sub(f32x4.sub(v128.shuffle<i64>(xyHigh, zwHigh, 0, 2), mean), rest);
    const fourth = f32x4.sub(f32x4.sub(v128.shuffle<i64>(xyHigh, zwHigh, 1, 3), mean), rest);
    v128.store(out, f32x4.mul(first, v128.load32_splat(window)));
    v128.store(out, f32x4.mul(second, v128.load32_splat(window, 4)), 16);
    v128.store(out, f32x4.mul(third, v128.load32_splat(window, 8)), 32);
    v128.store(out, f32x4.mul(fourth, v128.load32_splat(window, 12)), 48);
  }
}

/** The transform of `points` complex numbers at `x`; `y` has as much room. Returns which of both holds the result. */
export function transform(x: usize, y: usize, points: usize, twiddles: usize): usize {
  let stride: usize = 1;
  let length = points;
  for (; length > 4; length >>= 2, stride <<= 2) {
    quarters(x, y, length >> 2, stride << 5, twiddles);
    twiddles += (length >> 2) * TWIDDLE_BYTES;
    const swap = x;
    x = y;
    y = swap;
  }
  if (length === 4) lastQuarters(x, stride << 5);
  else lastHalves(x, stride << 5);
  return x;
}

function quarters(x: usize, y: usize, quarterLength: usize, strideBytes: usize, twiddles: usize): void {
  const quarterBytes = quarterLength * strideBytes;
  for (let p: usize = 0; p < quarterLength; p++, twiddles += TWIDDLE_BYTES) {
    const w1r = v128.load32_splat(twiddles);
    const w1i = v128.load32_splat(twiddles, 4);
    const w2r = v128.load32_splat(twiddles, 8);
    const w2i = v128.load32_splat(twiddles, 12);
    const w3r = v128.load32_splat(twiddles, 16);
    const w3i = v128.load32_splat(twiddles, 20);
    for (const end = x + strideBytes; x < end; x += 32, y += 32) {
      const x1 = x + quarterBytes;
      const x2 = x1 + quarterBytes;
      const x3 = x2 + quarterBytes;
      const ar = v128.load(x);
      const ai = v128.load(x, 16);
      const cr = v128.load(x2);
      const ci = v128.load(x2, 16);
      const br = v128.load(x1);
      const bi = v128.load(x1, 16);
      const dr = v128.load(x3);
      const di = v128.load(x3, 16);
      const sumAcR = f32x4.add(ar, cr);
      const sumAcI = f32x4.add(ai, ci);
      const lessAcR = f32x4.sub(ar, cr);
      const lessAcI = f32x4.sub(ai, ci);
      const sumBdR = f32x4.add(br, dr);
      const sumBdI = f32x4.add(bi, di);
      const lessBdR = f32x4.sub(br, dr);
      const lessBdI = f32x4.sub(bi, di);
      v128.store(y, f32x4.add(sumAcR, sumBdR));
      v128.store(y, f32x4.add(sumAcI, sumBdI), 16);
      const y1 = y + strideBytes;
      const y2 = y1 + strideBytes;
      const y3 = y2 + strideBytes;
      const r1 = f32x4.add(lessAcR, lessBdI);
      const i1 = f32x4.sub(lessAcI, lessBdR);
      v128.store(y1, f32x4.sub(f32x4.mul(r1, w1r), f32x4.mul(i1, w1i)));
      v128.store(y1, f32x4.add(f32x4.mul(r1, w1i), f32x4.mul(i1, w1r)), 16);
      const r2 = f32x4.sub(sumAcR, sumBdR);
      const i2 = f32x4.sub(sumAcI, sumBdI);
      v128.store(y2, f32x4.sub(f32x4.mul(r2, w2r), f32x4.mul(i2, w2i)));
      v128.store(y2, f32x4.add(f32x4.mul(r2, w2i), f32x4.mul(i2, w2r)), 16);
      const r3 = f32x4.sub(lessAcR, lessBdI);
      const i3 = f32x4.add(lessAcI, lessBdR);
      v128.store(y3, f32x4.sub(f32x4.mul(r3, w3r), f32x4.mul(i3, w3i)));
      v128.store(y3, f32x4.add(f32x4.mul(r3, w3i), f32x4.mul(i3, w3r)), 16);
    }
    y += strideBytes * 3;
  }
}

/** The last stage has no twiddles and leaves every number in its place. */
function lastQuarters(x: usize, bytes: usize): void {
  for (const end = x + bytes; x < end; x += 32) {
    const x1 = x + bytes;
    const x2 = x1 + bytes;
    const x3 = x2 + bytes;
    const ar = v128.load(x);
    const ai = v128.load(x, 16);
    const br = v128.load(x1);
    const bi = v128.load(x1, 16);
    const cr = v128.load(x2);
    const ci = v128.load(x2, 16);
    const dr = v128.load(x3);
    const di = v128.load(x3, 16);
    const sumAcR = f32x4.add(ar, cr);
    const sumAcI = f32x4.add(ai, ci);
    const lessAcR = f32x4.sub(ar, cr);
    const lessAcI = f32x4.sub(ai, ci);
    const sumBdR = f32x4.add(br, dr);
    const sumBdI = f32x4.add(bi, di);
    const lessBdR = f32x4.sub(br, dr);
    const lessBdI = f32x4.sub(bi, di);
    v128.store(x, f32x4.add(sumAcR, sumBdR));
    v128.store(x, f32x4.add(sumAcI, sumBdI), 16);
    v128.store(x1, f32x4.add(lessAcR, lessBdI));
    v128.store(x1, f32x4.sub(lessAcI, lessBdR), 16);
    v128.store(x2, f32x4.sub(sumAcR, sumBdR));
    v128.store(x2, f32x4.sub(sumAcI, sumBdI), 16);
    v128.store(x3, f32x4.sub(lessAcR, lessBdI));
    v128.store(x3, f32x4.add(lessAcI, lessBdR), 16);
  }
}

function lastHalves(x: usize, bytes: usize): void {
  for (const end = x + bytes; x < end; x += 16) {
    const a = v128.load(x);
    const b = v128.load(x + bytes);
    v128.store(x, f32x4.add(a, b));
    v128.store(x + bytes, f32x4.sub(a, b));
  }
}

/**
 * Powers of the bins 0 to M - 1 of the real frames, four lanes per bin, from their complex transform `z`.
 *
 * With the window divided by its sum, |2 X[k] / sum(w)|^2 = |S + T|^2 and that of bin M - k = |S - T|^2, where
 * S = Z[k] + conj Z[M - k] and T = -i exp(-i pi k / M) (Z[k] - conj Z[M - k]).
 * @param turns cosine and sine of pi k / M for k = 0 to M / 2.
 */
export function splitPowers(z: usize, points: usize, turns: usize, power: usize): void {
  const zero = f32x4.mul(f32x4.splat(2), f32x4.add(v128.load(z), v128.load(z, 16)));
  v128.store(power, f32x4.mul(zero, zero));
  let mirror = z + (points << 5);
  let mirrorPower = power + (points << 4);
  for (const end = power + (points << 3); power < end;) {
    z += 32;
    mirror -= 32;
    power += 16;
    mirrorPower -= 16;
    turns += 8;
    const zr = v128.load(z);
    const zi = v128.load(z, 16);
    const mr = v128.load(mirror);
    const mi = v128.load(mirror, 16);
    const cosine = v128.load32_splat(turns);
    const sine = v128.load32_splat(turns, 4);
    const sr = f32x4.add(zr, mr);
    const si = f32x4.sub(zi, mi);
    const dr = f32x4.sub(zr, mr);
    const di = f32x4.add(zi, mi);
    const tr = f32x4.sub(f32x4.mul(di, cosine), f32x4.mul(dr, sine));
    const ti = f32x4.add(f32x4.mul(dr, cosine), f32x4.mul(di, sine));
    const upR = f32x4.add(sr, tr);
    const upI = f32x4.sub(si, ti);
    const downR = f32x4.sub(sr, tr);
    const downI = f32x4.add(si, ti);
    v128.store(mirrorPower, f32x4.add(f32x4.mul(downR, downR), f32x4.mul(downI, downI)));
    v128.store(power, f32x4.add(f32x4.mul(upR, upR), f32x4.mul(upI, upI)));
  }
}

/** Bins `[first, end)` of four lanes to one row per frame, `stride` floats apart; writes up to 3 floats past each row. */
export function lanesToRows(lanes: usize, first: usize, end: usize, rows: usize, stride: usize): void {
  const second = rows + (stride << 2);
  const third = second + (stride << 2);
  const fourth = third + (stride << 2);
  const from = lanes + (first << 4);
  for (let at: usize = 0, bytes = (end - first) << 2; at < bytes; at += 16) {
    const x = v128.load(from + (at << 2));
    const y = v128.load(from + (at << 2), 16);
    const z = v128.load(from + (at << 2), 32);
    const w = v128.load(from + (at << 2), 48);
    const xyLow = v128.shuffle<i32>(x, y, 0, 4, 1, 5);
    const xyHigh = v128.shuffle<i32>(x, y, 2, 6, 3, 7);
    const zwLow = v128.shuffle<i32>(z, w, 0, 4, 1, 5);
    const zwHigh = v128.shuffle<i32>(z, w, 2, 6, 3, 7);
    v128.store(rows + at, v128.shuffle<i64>(xyLow, zwLow, 0, 2));
    v128.store(second + at, v128.shuffle<i64>(xyLow, zwLow, 1, 3));
    v128.store(third + at, v128.shuffle<i64>(xyHigh, zwHigh, 0, 2));
    v128.store(fourth + at, v128.shuffle<i64>(xyHigh, zwHigh, 1, 3));
  }
}
