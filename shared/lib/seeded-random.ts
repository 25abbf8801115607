/** Numbers in [0, 1), the same for the same seed on every machine. */
export type Random = () => number;

/**
 * A small fast generator with 32 bits of state: good enough for test signals, useless for secrets.
 * Source: Tommy Ettinger (2017), mulberry32, public domain.
 */
export function seededRandom(seed: number): Random {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 0x1_0000_0000;
  };
}

/**
 * Normally distributed numbers of mean 0 and variance 1, two from each pair of uniform ones.
 * Source: Box and Muller (1958), A note on the generation of random normal deviates.
 */
export function seededGaussian(random: Random): Random {
  let spare: number | undefined;
  return () => {
    if (spare !== undefined) {
      const kept = spare;
      spare = undefined;
      return kept;
    }
    const radius = Math.sqrt(-2 * Math.log(1 - random()));
    const angle = 2 * Math.PI * random();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
}

export function between(random: Random, [low, high]: readonly [number, number]): number {
  return low + (high - low) * random();
}
