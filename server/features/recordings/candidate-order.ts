/** Bits of a digit of the sort: a double has four of them. */
const digitBits = 16;
const digitValues = 1 << digitBits;
const digitsPerKey = 4;
const highestBit = 0x8000;
const allBits = 0xffff;

/** Keys that rise whichever way the order goes; what has no value comes last. Adding zero makes one zero of both. */
export function writeKeys(
  keys: Float64Array,
  values: readonly (number | null)[],
  isDescending: boolean,
): void {
  const sign = isDescending ? -1 : 1;
  for (let place = 0; place < values.length; place++) {
    const value = values[place]!;
    keys[place] = value === null ? Infinity : sign * value + 0;
  }
}

/**
 * Places of the keys in rising order, equal ones as they stand; no key may be NaN. A radix sort over the bits of the doubles
 * (IEEE 754, low byte first: with the sign turned round, and all other bits of negative ones, they rise as the numbers do),
 * O(n), since requests wait for it: a sort by comparing takes several times as long.
 */
export function risingPlaces(keys: Float64Array): Uint32Array {
  const digits = new Uint16Array(keys.slice().buffer);
  for (let first = 0; first < digits.length; first += digitsPerKey) makeRising(digits, first);
  let places = new Uint32Array(keys.length);
  for (let place = 0; place < places.length; place++) places[place] = place;
  for (let digit = 0; digit < digitsPerKey; digit++) places = sortByDigit(places, digits, digit);
  return places;
}

function makeRising(digits: Uint16Array, first: number): void {
  const last = first + digitsPerKey - 1;
  if (digits[last]! < highestBit) {
    digits[last]! ^= highestBit;
    return;
  }
  for (let digit = first; digit <= last; digit++) digits[digit]! ^= allBits;
}

/** Stable: those with the same digit stay as they stand. */
function sortByDigit(
  places: Uint32Array<ArrayBuffer>,
  digits: Uint16Array,
  digit: number,
): Uint32Array<ArrayBuffer> {
  const next = new Uint32Array(digitValues + 1);
  for (let at = digit; at < digits.length; at += digitsPerKey) next[digits[at]! + 1]! += 1;
  for (let value = 0; value < digitValues; value++) next[value + 1]! += next[value]!;
  const sorted = new Uint32Array(places.length);
  for (let n = 0; n < places.length; n++) {
    const place = places[n]!;
    sorted[next[digits[digitsPerKey * place + digit]!]!++] = place;
  }
  return sorted;
}
