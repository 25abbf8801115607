const transforms = new Map<number, InverseFft>();

/** One transform per size and thread, shared by all callers: fill it, transform, and read before anybody else does the same. */
export function inverseFft(size: number): InverseFft {
  const transform = transforms.get(size) ?? new InverseFft(size);
  transforms.set(size, transform);
  return transform;
}

/**
 * The inverse discrete Fourier transform x[n] = sum over k of X[k] exp(2 pi i k n / N), not divided by N, for small N.
 *
 * @param size N, a power of two, at least 2.
 * @throws RangeError for any other size. NaN spreads to all values. Cost: about 5 N log2 N operations.
 * Source: J. W. Cooley and J. W. Tukey, Math. Comp. 19 (1965) 297.
 */
class InverseFft {
  readonly size: number;
  /** Put X[k] at `slot[k]` of `re` and `im`; after `transform` x[n] stands at n. */
  readonly re: Float64Array;
  readonly im: Float64Array;
  readonly slot: Uint16Array;
  readonly #cosines: Float64Array;
  readonly #sines: Float64Array;

  constructor(size: number) {
    const bits = Math.log2(size);
    if (!Number.isInteger(bits) || bits < 1) throw new RangeError(`size: ${size} is not a power of two`);
    this.size = size;
    this.re = new Float64Array(size);
    this.im = new Float64Array(size);
    this.slot = Uint16Array.from({ length: size }, (_, k) => reversed(k, bits));
    this.#cosines = Float64Array.from({ length: size / 2 }, (_, k) => Math.cos((2 * Math.PI * k) / size));
    this.#sines = Float64Array.from({ length: size / 2 }, (_, k) => Math.sin((2 * Math.PI * k) / size));
  }

  transform(): void {
    const { re, im, size } = this;
    const cosines = this.#cosines;
    const sines = this.#sines;
    for (let half = 1; half < size; half *= 2) {
      const stride = size / (2 * half);
      for (let k = 0; k < half; k++) {
        const c = cosines[k * stride]!;
        const s = sines[k * stride]!;
        for (let a = k; a < size; a += 2 * half) {
          const b = a + half;
          const br = re[b]! * c - im[b]! * s;
          const bi = re[b]! * s + im[b]! * c;
          re[b] = re[a]! - br;
          im[b] = im[a]! - bi;
          re[a] = re[a]! + br;
          im[a] = im[a]! + bi;
        }
      }
    }
  }
}

function reversed(value: number, bits: number): number {
  let result = 0;
  for (let bit = 0; bit < bits; bit++) if (value & (1 << bit)) result |= 1 << (bits - 1 - bit);
  return result;
}

export type { InverseFft };
