import reference from './spectra.json' with { type: 'json' };

export const spectra = reference;
export const REFERENCE_RATE_HZ = 192_000;

/** The generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5: the same numbers as in spectra.py. */
function* noise(seed: number): Generator<number> {
  for (let state = seed; ;) {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    yield (state >>> 8) / 2 ** 24 - 0.5;
  }
}

export function makeReferenceSignal(count: number): Float32Array {
  const random = noise(12345);
  return Float32Array.from({ length: count }, (_, n) => {
    const tone = 0.25 * Math.sin((2 * Math.PI * 61_234.5 * n) / REFERENCE_RATE_HZ);
    const hum = 0.5 * Math.sin((2 * Math.PI * 150 * n) / REFERENCE_RATE_HZ);
    return 0.02 * (random.next().value as number) + tone + hum + 0.05;
  });
}
