/** What one stretch of a channel tells about the steps of its samples; plain data. */
export interface EffectiveBitsPart {
  /** Bits that are ever set in the codes: their bitwise or. */
  setBits: number;
  /** False where a sample of a float file lies between the steps of 24 bits. */
  areWholeSteps: boolean;
  /** Share of the codes within reach that occur, 0 to 1; `null` where there were too few samples to tell. */
  usedShare: number | null;
}

export interface EffectiveBits {
  /** Bits per sample that carry something; `null` where the samples do not tell. */
  bits: number | null;
  /** Lowest bits that are zero in every sample. */
  zeroBits: number;
  /** One in this many codes occurs; 1 where all do, `null` where the samples do not tell. */
  codesPerUsed: number | null;
}

export interface SampleFormat {
  encoding: 'integer' | 'float';
  bitsPerSample: number;
}

/** float32 holds this many bits exactly: the steps of a float file are looked for down to there. */
const FLOAT_BITS = 24;
/** Codes are counted within 2^15 of the first mean on either side: the bits for them stay in the nearest cache. */
const REACH_BITS = 15;
const VISITED_STRIDE = 16;
const MOST_VISITED = 1 << 18;
const LEAST_VISITED = 1024;
const LEAST_REPEATS = 64;
/** Fewer distinct codes than this share of what evenly spread samples would give: some codes do not occur. */
const GAPS_UNDER_SHARE = 0.85;
/** The same where each code had few visits: samples of a tone come in flocks and hit fewer codes than chance would. */
const GAPS_UNDER_SHARE_OF_FEW = 0.6;
const MANY_VISITS_PER_CODE = 6;
/** Gaps must say more than this over the zero bits, else they are only the same bits estimated. */
const LEAST_MORE_BITS = 0.5;
/** Outer half of a window of codes against its inner half: between these the density is even enough. */
const EVEN_DENSITY = { low: 0.7, high: 1.4 };

/**
 * Looks at which codes the samples of a channel take, to tell files whose samples carry fewer bits than are stored.
 *
 * Zero bits: the bitwise or of all codes; a 16-bit recording stored in 24 bits has eight. Codes that do not occur: among
 * every sixteenth sample within 2^15 codes of the mean, N samples take D distinct codes of W. Were M codes in use and equally
 * likely, D = M (1 - exp(-N / M)); solved for M, M / W is the share in use, and scaling by g after recording leaves 1 / g.
 *
 * Cost: under 1 ns per sample; the or ends as soon as the lowest bit was seen. Samples re full scale, finite.
 * Source of the estimate: the occupancy problem, W. Feller, An introduction to probability theory, 1968, vol. 1, IV.2.
 */
export class EffectiveBitsTracker {
  readonly #scale: number;
  readonly #isFloat: boolean;
  readonly #codes = new CodeCounter();
  #setBits = 0;
  #areWholeSteps = true;

  constructor({ encoding, bitsPerSample }: SampleFormat) {
    this.#isFloat = encoding === 'float';
    this.#scale = 2 ** ((this.#isFloat ? FLOAT_BITS : bitsPerSample) - 1);
    this.#codes.scale = 2 ** (Math.min(this.#isFloat ? FLOAT_BITS : bitsPerSample, FLOAT_BITS) - 1);
  }

  push(samples: Float32Array, from: number, to: number): void {
    if (this.#isFloat) this.#followFloats(samples, from, to);
    else this.#followCodes(samples, from, to);
    this.#codes.push(samples, from, to);
  }

  finish(): EffectiveBitsPart {
    return {
      setBits: this.#setBits,
      areWholeSteps: this.#areWholeSteps,
      usedShare: this.#codes.usedShare(),
    };
  }

  #followCodes(samples: Float32Array, from: number, to: number): void {
    if ((this.#setBits & 1) === 1) return;
    const scale = this.#scale;
    let setBits = this.#setBits;
    for (let i = from; i < to; i++) setBits |= samples[i]! * scale;
    this.#setBits = setBits;
  }

  #followFloats(samples: Float32Array, from: number, to: number): void {
    const scale = this.#scale;
    for (let i = from; i < to && this.#areWholeSteps; i++) {
      const scaled = samples[i]! * scale;
      const code = scaled | 0;
      this.#areWholeSteps = code === scaled;
      this.#setBits |= code;
    }
  }
}

/** Distinct codes near the mean, by how far from it they lie. */
class CodeCounter {
  scale = 1;
  readonly #seen = new Uint32Array(2 ** (REACH_BITS + 1 - 5));
  readonly #visits = new Uint32Array(REACH_BITS + 1);
  readonly #distinct = new Uint32Array(REACH_BITS + 1);
  #middle: number | null = null;
  #visited = 0;

  push(samples: Float32Array, from: number, to: number): void {
    if (this.#visited >= MOST_VISITED || from >= to) return;
    const { scale } = this;
    const middle = (this.#middle ??= meanCode(samples, from, to, scale));
    const seen = this.#seen;
    const reach = 2 ** REACH_BITS;
    for (let i = from; i < to; i += VISITED_STRIDE) {
      const distance = Math.floor(samples[i]! * scale) - middle;
      if (distance < -reach || distance >= reach) continue;
      const level = 32 - Math.clz32(distance ^ (distance >> 31));
      const place = distance + reach;
      const mask = 1 << (place & 31);
      this.#visits[level]!++;
      if ((seen[place >>> 5]! & mask) !== 0) continue;
      seen[place >>> 5]! |= mask;
      this.#distinct[level]!++;
    }
    this.#visited += Math.ceil((to - from) / VISITED_STRIDE);
  }

  /** By the widest window of codes over which the samples are spread evenly. */
  usedShare(): number | null {
    const visits = cumulative(this.#visits);
    const distinct = cumulative(this.#distinct);
    for (let level = REACH_BITS; level > 2; level--) {
      const inner = visits[level - 1]!;
      const outer = visits[level]! - inner;
      if (visits[level]! < LEAST_VISITED) return null;
      if (outer < EVEN_DENSITY.low * inner || outer > EVEN_DENSITY.high * inner) continue;
      return shareInUse(visits[level]!, distinct[level]!, 2 ** (level + 1));
    }
    return null;
  }
}

function meanCode(samples: Float32Array, from: number, to: number, scale: number): number {
  let sum = 0;
  for (let i = from; i < to; i++) sum += samples[i]!;
  return Math.round((sum / (to - from)) * scale);
}

function cumulative(counts: Uint32Array): number[] {
  let sum = 0;
  return Array.from(counts, (count) => (sum += count));
}

function shareInUse(visits: number, distinct: number, codes: number): number | null {
  const expected = codes * (1 - Math.exp(-visits / codes));
  const repeats = visits - distinct;
  const isSure = visits >= MANY_VISITS_PER_CODE * codes;
  if (distinct >= (isSure ? GAPS_UNDER_SHARE : GAPS_UNDER_SHARE_OF_FEW) * expected)
    return repeats >= LEAST_REPEATS ? 1 : null;
  if (repeats < LEAST_REPEATS) return null;
  let low = distinct;
  let high = codes;
  while (high - low > 0.5) {
    const middle = (low + high) / 2;
    if (middle * (1 - Math.exp(-visits / middle)) < distinct) low = middle;
    else high = middle;
  }
  return low / codes;
}

/**
 * The parts of a recording, joined: what any of them uses is in use.
 *
 * @returns `bits` is the least of both views. Digital silence tells nothing, and nor do floats between the steps of 24 bits.
 */
export function joinEffectiveBits(
  parts: readonly EffectiveBitsPart[],
  { encoding, bitsPerSample }: SampleFormat,
): EffectiveBits {
  const storedBits = encoding === 'float' ? FLOAT_BITS : bitsPerSample;
  const setBits = parts.reduce((bits, part) => bits | part.setBits, 0);
  const areWholeSteps = parts.every((part) => part.areWholeSteps);
  const shares = parts.flatMap(({ usedShare }) => (usedShare === null ? [] : [usedShare]));
  const codesPerUsed = shares.length > 0 ? 1 / Math.max(...shares) : null;
  const zeroBits = areWholeSteps && setBits !== 0 ? 31 - Math.clz32(setBits & -setBits) : 0;
  if (setBits === 0) return { bits: null, zeroBits: 0, codesPerUsed: null };
  const gapBits = Math.log2(codesPerUsed ?? 1);
  const lost = gapBits > zeroBits + LEAST_MORE_BITS ? gapBits : zeroBits;
  const isTold = areWholeSteps || lost > 0;
  return { bits: isTold ? storedBits - lost : null, zeroBits, codesPerUsed };
}
