import { seededRandom } from '@shared/lib/seeded-random.ts';

/** What the model draws, the same for the same seed. */
export function createRandom(seed: number) {
  const next = seededRandom(seed);
  return {
    next,
    below: (limit: number) => Math.floor(next() * limit),
    chance: (share: number) => next() < share,
    pick: <Item>(items: readonly Item[]): Item | undefined => items[Math.floor(next() * items.length)],
  };
}

export type Random = ReturnType<typeof createRandom>;
