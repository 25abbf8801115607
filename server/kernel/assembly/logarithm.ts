/**
 * Natural logarithm of four positive, normal float32 within 1e-7 relative; -88.7 or less for zero and subnormals.
 *
 * Source: S. Moshier, Cephes, logf.c: x = 2^e (1 + f) with 1 + f from sqrt(1/2) to sqrt(2), then a polynomial in f.
 */
export function naturalLog(x: v128): v128 {
  const half = i32x4.splat(0x3f000000);
  let mantissa = v128.or(v128.and(x, i32x4.splat(0x007fffff)), half);
  let exponent = f32x4.convert_i32x4_s(i32x4.sub(i32x4.shr_u(x, 23), i32x4.splat(126)));
  // Below sqrt(1/2) the mantissa is doubled and the exponent lowered by one.
  const isLow = f32x4.lt(mantissa, f32x4.splat(0.70710677));
  exponent = f32x4.sub(exponent, v128.and(isLow, f32x4.splat(1)));
  mantissa = f32x4.add(mantissa, v128.and(isLow, mantissa));
  const f = f32x4.sub(mantissa, f32x4.splat(1));
  const square = f32x4.mul(f, f);
  let y = f32x4.splat(7.0376836292e-2);
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(-1.151461031e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(1.167699874e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(-1.2420140846e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(1.4249322787e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(-1.6668057665e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(2.0000714765e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(-2.4999993993e-1));
  y = f32x4.add(f32x4.mul(y, f), f32x4.splat(3.3333331174e-1));
  y = f32x4.mul(f32x4.mul(y, f), square);
  y = f32x4.add(y, f32x4.mul(exponent, f32x4.splat(-2.1219444e-4)));
  y = f32x4.sub(y, f32x4.mul(square, f32x4.splat(0.5)));
  return f32x4.add(f32x4.add(f, y), f32x4.mul(exponent, f32x4.splat(0.693359375)));
}

/** ln(1 + x) of four float32 from 0, accurate where x is small too: the rounding of 1 + x is put back in first order. */
export function naturalLogOfOnePlus(x: v128): v128 {
  const one = f32x4.splat(1);
  const sum = f32x4.add(one, x);
  const lost = f32x4.sub(x, f32x4.sub(sum, one));
  return f32x4.add(naturalLog(sum), f32x4.div(lost, sum));
}
