import reference from './listening.json' with { type: 'json' };

export const listeningReference = reference;
export const LINES_RATE_HZ = 96_000;
export const CARRIER_HZ = 40_000;
export const LINES_PERIOD = 9600;

/** The generator of Numerical Recipes, upper 24 bits, -0.5 to 0.5: the same numbers as in listening.py. */
function makeNoise(count: number, seed: number): Float64Array {
  let state = seed;
  return Float64Array.from({ length: count }, () => {
    state = (Math.imul(1664525, state) + 1013904223) >>> 0;
    return (state >>> 8) / 2 ** 24 - 0.5;
  });
}

/** One period of lines on both sides of the carrier. */
export function makeLines(): Float32Array {
  const frequencies: number[] = [];
  for (const startHz of [40_500, 35_000])
    for (let hz = startHz; hz < startHz + 4500; hz += 50) frequencies.push(hz);
  const phases = makeNoise(frequencies.length, 7).map((value) => 2 * Math.PI * value);
  return Float32Array.from({ length: LINES_PERIOD }, (_, n) =>
    frequencies.reduce(
      (sum, hz, i) => sum + 0.01 * Math.cos((2 * Math.PI * hz * n) / LINES_RATE_HZ + phases[i]!),
      0,
    ),
  );
}

export const GATE_SIZE = 1024;
export const QUIET_SAMPLES = 8000;

/** Hum and noise, and one burst of 31 kHz at 16,000. */
export function makeHumWithBurst(): Float32Array {
  const frames = 24_000;
  const noise = makeNoise(frames, 12345);
  return Float32Array.from({ length: frames }, (_, n) => {
    const hum = 0.2 * Math.sin((2 * Math.PI * 1000 * n) / LINES_RATE_HZ);
    const since = n - 16_000;
    const burst =
      since < 0 ? 0 : 0.8 * Math.exp(-since / 40) * Math.sin((2 * Math.PI * 31_000 * since) / LINES_RATE_HZ);
    return 0.05 * noise[n]! + hum + burst;
  });
}
