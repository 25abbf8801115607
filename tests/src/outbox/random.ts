/** A generator of the same numbers for the same seed (mulberry32, from memory). */
export function createRandom(seed: number) {
  let state = seed >>> 0;
  const next = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
  return {
    next,
    below: (limit: number) => Math.floor(next() * limit),
    chance: (share: number) => next() < share,
    pick: <Item>(items: readonly Item[]): Item | undefined => items[Math.floor(next() * items.length)],
  };
}

export type Random = ReturnType<typeof createRandom>;
