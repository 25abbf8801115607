/** Whole numbers from 0 to below `bound`, the same for the same seed on every machine. */
export type Draw = (bound: number) => number;

/**
 * For choosing examples, useless for secrets. 32 bits of state, one step per number.
 * Source: Tommy Ettinger (2017), mulberry32, public domain.
 */
export function seededDraw(seed: number): Draw {
  let state = seed >>> 0;
  return (bound) => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return Math.floor((((mixed ^ (mixed >>> 14)) >>> 0) / 0x1_0000_0000) * bound);
  };
}

/** Every number from 0 to below `count` once, in a drawn order (Fisher and Yates 1938, in the form of Durstenfeld 1964). */
export function drawOrder(count: number, seed: number): Uint32Array {
  const draw = seededDraw(seed);
  const order = Uint32Array.from({ length: count }, (_value, place) => place);
  for (let last = count - 1; last > 0; last--) {
    const other = draw(last + 1);
    const kept = order[last]!;
    order[last] = order[other]!;
    order[other] = kept;
  }
  return order;
}
