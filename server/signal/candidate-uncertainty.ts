import { drawOrder } from '../../shared/lib/seeded-draw.ts';

export interface UncertaintyFacts {
  /** dB above the noise; `null` where it was not told. */
  snrDb: readonly (number | null)[];
  /** Share of the energy above the hearing line, from 0 to 1, for those that reach across it; `null` for all others. */
  shareAcross: readonly (number | null)[];
}

/** A candidate this much stronger than the weakest is half as uncertain. */
const halvingDb = 3;

/**
 * How far the detector itself was from deciding otherwise, from 0 (clear) to 1, for each candidate:
 * `u = max(2^(-(snr - least) / 3 dB), 1 - |2 share - 1|)`. The first term is 1 at the strength of the weakest candidate,
 * which stands at the threshold; the second is 1 where the energy lies half above, half below the hearing line, so that the
 * class could be either. Without a strength the first term is 1. No candidates give none. O(n).
 * Source: common practice of uncertainty sampling (Lewis and Gale 1994); the two terms are ours.
 */
export function uncertaintyOf({ snrDb, shareAcross }: UncertaintyFacts): Float64Array {
  let leastDb = Infinity;
  for (const value of snrDb) if (value !== null && value < leastDb) leastDb = value;
  return Float64Array.from(snrDb, (value, place) => {
    const near = value === null ? 1 : 2 ** ((leastDb - value) / halvingDb);
    const share = shareAcross[place] ?? null;
    return share === null ? near : Math.max(near, 1 - Math.abs(2 * share - 1));
  });
}

/** Of so many places in a row the last is drawn at random. */
export const placesPerDrawn = 4;

/** Whether the place in a mixed order was drawn instead of chosen. */
export function isDrawnPlace(rank: number): boolean {
  return rank % placesPerDrawn === placesPerDrawn - 1;
}

/**
 * The same places in an order in which every fourth is drawn at random from all that are left, so that not only doubtful ones
 * are looked at. O(n); the same for the same seed.
 */
export function mixDrawn(order: Uint32Array, seed: number): Uint32Array {
  const drawn = drawOrder(order.length, seed);
  const isPlaced = new Uint8Array(order.length);
  const mixed = new Uint32Array(order.length);
  let nextChosen = 0;
  let nextDrawn = 0;
  for (let rank = 0; rank < order.length; rank++) {
    if (isDrawnPlace(rank)) {
      while (isPlaced[drawn[nextDrawn]!] === 1) nextDrawn++;
      mixed[rank] = drawn[nextDrawn]!;
    } else {
      while (isPlaced[order[nextChosen]!] === 1) nextChosen++;
      mixed[rank] = order[nextChosen]!;
    }
    isPlaced[mixed[rank]!] = 1;
  }
  return mixed;
}
