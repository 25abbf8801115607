/** Ordinals of candidates with what they are ordered by, rising in both. */
export interface RankedSlice {
  keys: Float64Array;
  ordinals: Uint32Array;
}

/** Keys rise, whichever way the order goes, and what has no value comes last. */
export function toRankedSlice(
  ordinals: readonly number[],
  values: readonly (number | null)[],
  isDescending: boolean,
): RankedSlice {
  const keys = Float64Array.from(values, (value) => {
    if (value === null) return Infinity;
    return isDescending ? -value : value;
  });
  return { keys, ordinals: Uint32Array.from(ordinals) };
}

/**
 * One step of a merge sort: each two neighbours become one slice, so that half as many are left. Of equal keys those of the
 * earlier slice come first; slices in the order of their ordinals therefore stay in it. O(n).
 */
export function mergeNeighbours(slices: readonly RankedSlice[]): RankedSlice[] {
  const merged: RankedSlice[] = [];
  for (let index = 0; index < slices.length; index += 2) {
    const left = slices[index]!;
    const right = slices[index + 1];
    merged.push(right === undefined ? left : mergeTwo(left, right));
  }
  return merged;
}

function mergeTwo(left: RankedSlice, right: RankedSlice): RankedSlice {
  const length = left.keys.length + right.keys.length;
  const keys = new Float64Array(length);
  const ordinals = new Uint32Array(length);
  let fromLeft = 0;
  let fromRight = 0;
  for (let place = 0; place < length; place++) {
    const isLeft =
      fromRight === right.keys.length ||
      (fromLeft < left.keys.length && left.keys[fromLeft]! <= right.keys[fromRight]!);
    keys[place] = isLeft ? left.keys[fromLeft]! : right.keys[fromRight]!;
    ordinals[place] = isLeft ? left.ordinals[fromLeft++]! : right.ordinals[fromRight++]!;
  }
  return { keys, ordinals };
}
