import { agnes } from 'ml-hclust';
import { kmeans } from 'ml-kmeans';
import { drawOrder } from '../../shared/lib/seeded-draw.ts';
import { featureCount } from './look-alike-features.ts';
import { groupOf, type LookAlikeGroup } from './look-alike-group.ts';

/** Changed whenever the same candidates could give other groups; stands in the key of a group. */
export const lookAlikesVersion = 1;
/** Larger groups are parted by distance from their middle, so that each part has spot checks of its own. */
export const mostMembers = 200;

/** Enough to find the families of a hundred thousand, and no more than takes a second or two. */
const sampleRows = 3000;
const mostCentres = 80;
const fewRows = 64;
const iterations = 30;
const seed = 20_200_606;
/** Groups whose members differ by less than this, in robust standard deviations per feature, become one. */
export const joinUnits = 0.9;
const joinDistance = joinUnits * Math.sqrt(featureCount);

/**
 * Parts candidates into groups that look alike, by their scaled descriptors (`scaleDescriptors`: `featureCount` numbers per row).
 * k-means with a fixed seed on at most 3,000 drawn rows gives many small centres (k = sqrt(4 n), at most 80); average linkage
 * joins centres whose mean distance is below 0.9 sqrt(features); every row goes to its nearest centre (Euclid). Large groups
 * come first, coherent ones before loose ones of the same size. Every place stands in one group. No rows give no groups. Rows
 * must be finite. The same rows give the same groups. O(n k features).
 * Source: Arthur and Vassilvitskii (2007) for the start of k-means; Sokal and Michener (1958) for average linkage.
 */
export function findLookAlikes(rows: Float64Array): LookAlikeGroup[] {
  const count = rows.length / featureCount;
  if (count === 0) return [];
  const centres = findCentres(rows, count);
  const groupOfCentre = joinCentres(centres);
  const members: number[][] = [];
  for (let place = 0; place < count; place++) {
    const group = groupOfCentre[nearestCentre(rows, place, centres)]!;
    (members[group] ??= []).push(place);
  }
  return members
    .filter((places) => places !== undefined)
    .flatMap((places) => groupOf(rows, places, { mostMembers, joinDistance }))
    .sort(
      (a, b) =>
        b.members.length * b.coherence - a.members.length * a.coherence || a.members[0]! - b.members[0]!,
    );
}

function findCentres(rows: Float64Array, count: number): number[][] {
  const drawn = drawOrder(count, seed).subarray(0, sampleRows).sort();
  const sample = Array.from(drawn, (place) => rowAt(rows, place));
  const distinct = [...new Map(sample.map((row) => [row.join(), row])).values()];
  if (distinct.length <= fewRows) return distinct;
  const k = Math.min(
    mostCentres,
    distinct.length,
    Math.max(fewRows, Math.round(Math.sqrt(4 * distinct.length))),
  );
  return kmeans(distinct, k, { seed, maxIterations: iterations }).centroids;
}

function rowAt(rows: Float64Array, place: number): number[] {
  return [...rows.subarray(place * featureCount, (place + 1) * featureCount)];
}

/** For each centre the number of the group that it becomes a part of. */
export function joinCentres(centres: number[][]): Int32Array {
  const groupOfCentre = new Int32Array(centres.length);
  if (centres.length < 2) return groupOfCentre;
  const tree = agnes(centres, { method: 'average' });
  tree.cut(joinDistance).forEach((cluster, group) => {
    cluster.traverse((node) => {
      if (node.isLeaf) groupOfCentre[node.index] = group;
    });
  });
  return groupOfCentre;
}

function nearestCentre(rows: Float64Array, place: number, centres: readonly number[][]): number {
  const first = place * featureCount;
  let nearest = 0;
  let least = Infinity;
  for (let number = 0; number < centres.length; number++) {
    const centre = centres[number]!;
    let sum = 0;
    for (let column = 0; column < featureCount; column++)
      sum += (rows[first + column]! - centre[column]!) ** 2;
    if (sum >= least) continue;
    least = sum;
    nearest = number;
  }
  return nearest;
}
