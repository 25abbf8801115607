import { seededDraw } from '../../shared/lib/seeded-draw.ts';
import { featureCount } from './look-alike-features.ts';

export interface LookAlikeGroup {
  /**
   * Places of the candidates, in the order in which they are offered: the example (the one most like all others), the spot
   * checks (the one least like the example, then drawn ones), and the rest, those most like the example first.
   */
  members: Uint32Array;
  /** How many after the example are spot checks. */
  spotChecks: number;
  /** 1 where all members are equal, 0 where they differ as much as a group may. */
  coherence: number;
}

interface GroupLimits {
  mostMembers: number;
  /** Distance at which two groups are not joined any more. */
  joinDistance: number;
}

const mostDrawn = 6;

/** The members as groups of at most `mostMembers`, parted by distance from their mean. */
export function groupOf(
  rows: Float64Array,
  places: readonly number[],
  { mostMembers, joinDistance }: GroupLimits,
): LookAlikeGroup[] {
  const mean = meanOf(rows, places);
  const sorted = sortByDistance(places, (place) => distanceTo(rows, place, mean));
  const parts = Math.ceil(sorted.length / mostMembers);
  const size = Math.ceil(sorted.length / parts);
  return Array.from({ length: parts }, (_value, part) =>
    describePart(rows, sorted.slice(part * size, (part + 1) * size), joinDistance),
  ).filter(({ members }) => members.length > 0);
}

function describePart(rows: Float64Array, places: readonly number[], joinDistance: number): LookAlikeGroup {
  const example = medoidOf(rows, places);
  const middle = rows.subarray(example * featureCount, (example + 1) * featureCount);
  const distance = (place: number) => distanceTo(rows, place, middle);
  const others = sortByDistance(
    places.filter((place) => place !== example),
    distance,
  );
  const spots = chooseSpotChecks(others, example);
  const rest = others.filter((place) => !spots.includes(place));
  const sum = others.reduce((total, place) => total + distance(place), 0);
  const meanDistance = others.length === 0 ? 0 : sum / others.length;
  return {
    members: Uint32Array.from([example, ...spots, ...rest]),
    spotChecks: spots.length,
    coherence: Math.max(0, 1 - meanDistance / joinDistance),
  };
}

/** The farthest, and more drawn ones the larger the group is: 4 in all of 34, 7 of 200. */
function chooseSpotChecks(others: readonly number[], seed: number): number[] {
  if (others.length === 0) return [];
  const wanted = Math.min(
    mostDrawn,
    Math.max(1, Math.round(Math.log2(others.length)) - 2),
    others.length - 1,
  );
  const draw = seededDraw(seed);
  const left = others.slice(0, -1);
  const drawn = Array.from({ length: Math.max(0, wanted) }, () => left.splice(draw(left.length), 1)[0]!);
  return [others.at(-1)!, ...drawn];
}

/** The member with the least sum of distances to all others; the first of equal ones. */
function medoidOf(rows: Float64Array, places: readonly number[]): number {
  let best = places[0]!;
  let leastSum = Infinity;
  for (const place of places) {
    const row = rows.subarray(place * featureCount, (place + 1) * featureCount);
    const sum = places.reduce((total, other) => total + distanceTo(rows, other, row), 0);
    if (sum >= leastSum) continue;
    leastSum = sum;
    best = place;
  }
  return best;
}

function meanOf(rows: Float64Array, places: readonly number[]): Float64Array {
  const mean = new Float64Array(featureCount);
  for (const place of places)
    for (let column = 0; column < featureCount; column++)
      mean[column]! += rows[place * featureCount + column]! / places.length;
  return mean;
}

/** Euclid. */
function distanceTo(rows: Float64Array, place: number, point: ArrayLike<number>): number {
  let sum = 0;
  for (let column = 0; column < featureCount; column++)
    sum += (rows[place * featureCount + column]! - point[column]!) ** 2;
  return Math.sqrt(sum);
}

/** Nearest first, equal ones by place. */
function sortByDistance(places: readonly number[], distance: (place: number) => number): number[] {
  const distances = new Map(places.map((place) => [place, distance(place)]));
  return [...places].sort((a, b) => distances.get(a)! - distances.get(b)! || a - b);
}
