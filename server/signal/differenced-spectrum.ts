import type { SourceSignal } from './band-energy.ts';
import { realFft } from './fft.ts';

/** Samples on either side of a window that are read as well. */
export const DIFFERENCE_REACH = 2;

const tapers = new Map<number, Float32Array>();
const responses = new Map<number, Float64Array>();

/**
 * Spectrum of a window of a signal under which a hum lies that is far stronger than what is looked for.
 *
 * The samples are differenced four times, which takes 24 dB per octave off below, and tapered by raised cosines at both ends; the
 * differences' response 16 sin^4(pi k / N) is to be divided out by `responseOf`. So the hum does not leak over the window's edges.
 *
 * @returns [.., .., Re X1, Im X1, Re X2, ...] as `realFft` leaves it, overwritten by the next call for the size.
 */
export function differencedSpectrum(
  source: SourceSignal,
  first: number,
  size: number,
  taper: number,
): Float32Array {
  const fft = realFft(size);
  const input = fft.input;
  const x = source.values;
  const from = source.origin + first;
  for (let n = 0, at = from; n < size; n++, at++) {
    input[n] = x[at - 2]! + x[at + 2]! - 4 * (x[at - 1]! + x[at + 1]!) + 6 * x[at]!;
  }
  const rise = taperOf(taper);
  for (let n = 0; n < taper; n++) {
    input[n] = input[n]! * rise[n]!;
    input[size - 1 - n] = input[size - 1 - n]! * rise[n]!;
  }
  fft.transform();
  return fft.output;
}

/** What differencing does to each line. */
export function responseOf(size: number): Float64Array {
  const known = responses.get(size);
  if (known) return known;
  const response = Float64Array.from(
    { length: size / 2 + 1 },
    (_, k) => 16 * Math.sin((Math.PI * k) / size) ** 4,
  );
  responses.set(size, response);
  return response;
}

function taperOf(length: number): Float32Array {
  const known = tapers.get(length);
  if (known) return known;
  const taper = Float32Array.from({ length }, (_, n) => 0.5 - 0.5 * Math.cos((Math.PI * (n + 0.5)) / length));
  tapers.set(length, taper);
  return taper;
}
