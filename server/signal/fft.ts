import createPffft from '@echogarden/pffft-wasm/simd';

/** A forward transform of `size` real samples with buffers of its own. */
export interface RealFft {
  readonly size: number;
  /** Write `size` samples here before `transform`. */
  readonly input: Float32Array;
  /** The same memory as `input`. */
  readonly inputBits: Int32Array;
  /** After `transform`: [X0, X(N/2), Re X1, Im X1, Re X2, ...], not normalised. */
  readonly output: Float32Array;
  transform(): void;
}

export const MINIMUM_FFT_SIZE = 32;
export const MAXIMUM_FFT_SIZE = 1 << 20;
const REAL = 0;
const FORWARD = 0;

const pffft = await createPffft();
const engines = new Map<number, RealFft>();

/**
 * The discrete Fourier transform X[k] = sum over n of x[n] exp(-2 pi i k n / N) of a real signal, in float32.
 *
 * One engine per size and thread, shared by all callers: fill `input`, call `transform`, and use `output` before
 * anybody else does the same. Rounding noise lies about 130 dB under the largest line of a frame.
 *
 * @param size N, a power of two, 32 to 1,048,576.
 * @throws RangeError for any other size.
 * Cost: about 5 microseconds for N = 2048. NaN in the input gives NaN everywhere.
 * Source: J. Pommier, PFFFT (after FFTPACK, P. Swarztrauber 1982).
 */
export function realFft(size: number): RealFft {
  if (!Number.isInteger(Math.log2(size)) || size < MINIMUM_FFT_SIZE || size > MAXIMUM_FFT_SIZE) {
    throw new RangeError(
      `size: ${size} is not a power of two from ${MINIMUM_FFT_SIZE} to ${MAXIMUM_FFT_SIZE}`,
    );
  }
  const known = engines.get(size);
  if (known) return known;
  const engine = createEngine(size);
  engines.set(size, engine);
  return engine;
}

function createEngine(size: number): RealFft {
  const bytes = size * Float32Array.BYTES_PER_ELEMENT;
  const setup = pffft._pffft_new_setup(size, REAL);
  const inputAt = pffft._pffft_aligned_malloc(bytes);
  const outputAt = pffft._pffft_aligned_malloc(bytes);
  const workAt = pffft._pffft_aligned_malloc(bytes);
  // Growing the heap detaches every view of it, so a view is renewed when the heap has changed.
  let input = viewOf(inputAt, size);
  let output = viewOf(outputAt, size);
  let inputBits = bitsOf(input);
  return {
    size,
    get input() {
      if (input.buffer !== pffft.HEAPF32.buffer) input = viewOf(inputAt, size);
      return input;
    },
    get inputBits() {
      if (inputBits.buffer !== pffft.HEAPF32.buffer) inputBits = bitsOf(viewOf(inputAt, size));
      return inputBits;
    },
    get output() {
      if (output.buffer !== pffft.HEAPF32.buffer) output = viewOf(outputAt, size);
      return output;
    },
    transform() {
      pffft._pffft_transform_ordered(setup, inputAt, outputAt, workAt, FORWARD);
    },
  };
}

function viewOf(pointer: number, size: number): Float32Array {
  const first = pointer / Float32Array.BYTES_PER_ELEMENT;
  return pffft.HEAPF32.subarray(first, first + size);
}

function bitsOf(values: Float32Array): Int32Array {
  return new Int32Array(values.buffer, values.byteOffset, values.length);
}
