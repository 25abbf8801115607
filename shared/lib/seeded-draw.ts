import { seededRandom } from './seeded-random.ts';

/** Whole numbers from 0 to below `bound`, the same for the same seed on every machine. */
export type Draw = (bound: number) => number;

/** For choosing examples, useless for secrets; one step of the generator per number. */
export function seededDraw(seed: number): Draw {
  const random = seededRandom(seed);
  return (bound) => Math.floor(random() * bound);
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
