/**
 * Chance that the sum of n squared unit normal values exceeds x: exp(-x/2) sum over j < n/2 of (x/2)^j / j!.
 *
 * @param degrees n, even, at least 2.
 * @throws RangeError for an odd n.
 * Source: M. Abramowitz and I. A. Stegun, Handbook of Mathematical Functions, 26.4.21.
 */
export function chiSquareTail(x: number, degrees: number): number {
  if (degrees < 2 || degrees % 2 !== 0) throw new RangeError(`degrees: ${degrees} is not even`);
  const half = x / 2;
  let term = Math.exp(-half);
  let sum = 0;
  for (let j = 0; j < degrees / 2; j++) {
    sum += term;
    term *= half / (j + 1);
  }
  return sum;
}

/**
 * The sum that n squared unit normal values exceed with a given chance; for an odd n the mean of its even neighbours.
 *
 * @param degrees n, at least 1.
 * @param chance above 0 and below 1; useful down to about 1e-250.
 */
export function chiSquareThreshold(degrees: number, chance: number): number {
  if (degrees % 2 !== 0) {
    const below = degrees > 1 ? chiSquareThreshold(degrees - 1, chance) : 0;
    return (below + chiSquareThreshold(degrees + 1, chance)) / 2;
  }
  let low = 0;
  let high = degrees + 1500;
  for (let step = 0; step < 60; step++) {
    const middle = (low + high) / 2;
    if (chiSquareTail(middle, degrees) > chance) low = middle;
    else high = middle;
  }
  return high;
}
