import { COARSE_BITS, FINGERPRINT_STEP_S, type Fingerprint } from './fingerprint.ts';

/** Coarse bits of eight steps 0.8 s apart in one number of 24 bits, by which likely copies are found in an index. */
export interface FingerprintKey {
  key: number;
  step: number;
}

export interface FingerprintMatch {
  /** Steps by which the other recording is shifted: its step s + offset sounds like step s of this one. */
  offset: number;
  /** Share of bits that differ where both have words. */
  bitErrorShare: number;
  comparedSteps: number;
}

const STEPS_PER_KEY = 8;
const STEPS_APART = 8;
const LAST_STEP_OF_KEY = (STEPS_PER_KEY - 1) * STEPS_APART;
const LEAST_KEYS = 16;
const STORED_KEYS_PER_10_S = 4;
const SEARCHED_KEYS_PER_10_S = 10;
/** Under a key, two recordings may be shifted against each other by this much more or less. */
const OFFSET_TOLERANCE = 1;
const WORD_BITS = 16;
/** Copies differ in up to a quarter of the bits, others in half of them; 8 s leave chance 4 standard deviations. */
const MOST_BIT_ERRORS = 0.32;
const LEAST_COMPARED_STEPS = 80;

/** Keys to be kept in an index: the most firmly decided ones, 4 for each 10 s and 16 at least. */
export function storedKeys(fingerprint: Fingerprint): FingerprintKey[] {
  return strongestKeys(fingerprint, STORED_KEYS_PER_10_S);
}

/** Keys to be looked up in it: more of them, since a copy orders them a little differently. */
export function searchedKeys(fingerprint: Fingerprint): FingerprintKey[] {
  return strongestKeys(fingerprint, SEARCHED_KEYS_PER_10_S);
}

function strongestKeys({ coarse, strengths }: Fingerprint, per10S: number): FingerprintKey[] {
  const found: { step: number; strength: number }[] = [];
  for (let step = 0; step + LAST_STEP_OF_KEY < coarse.length; step++) {
    let strength = Infinity;
    for (let k = 0; k < STEPS_PER_KEY; k++) strength = Math.min(strength, strengths[step + k * STEPS_APART]!);
    if (strength > 0) found.push({ step, strength });
  }
  const most = Math.max(LEAST_KEYS, Math.round((coarse.length * FINGERPRINT_STEP_S * per10S) / 10));
  found.sort((a, b) => b.strength - a.strength || a.step - b.step);
  return found.slice(0, most).map(({ step }) => ({ step, key: keyAt(coarse, step) }));
}

function keyAt(coarse: Uint8Array, step: number): number {
  let key = 0;
  for (let k = 0; k < STEPS_PER_KEY; k++) key = (key << COARSE_BITS) | coarse[step + k * STEPS_APART]!;
  return key;
}

/**
 * Whether two channels are copies of one sound, by the share of bits that differ at one of the offsets that shared keys
 * suggest; `null` where no offset has 8 s in common with under 32 % of the bits different.
 *
 * Chance gives 50 %, with a standard deviation of about 0.5 / sqrt(2 n) for n steps, since windows of 8 steps overlap.
 * Cost: 20 ns per step and offset.
 * @param offsets by which keys agree, step in the other minus step in this one.
 */
export function matchWords(
  words: Uint16Array,
  others: Uint16Array,
  offsets: readonly number[],
): FingerprintMatch | null {
  let best: FingerprintMatch | null = null;
  const tried = new Set<number>();
  for (const suggested of offsets) {
    for (let offset = suggested - OFFSET_TOLERANCE; offset <= suggested + OFFSET_TOLERANCE; offset++) {
      if (tried.has(offset)) continue;
      tried.add(offset);
      const match = compareAt(words, others, offset);
      if (match.comparedSteps < LEAST_COMPARED_STEPS || match.bitErrorShare > MOST_BIT_ERRORS) continue;
      if (!best || match.bitErrorShare < best.bitErrorShare) best = match;
    }
  }
  return best;
}

function compareAt(words: Uint16Array, others: Uint16Array, offset: number): FingerprintMatch {
  let comparedSteps = 0;
  let differing = 0;
  const end = Math.min(words.length, others.length - offset);
  for (let step = Math.max(0, -offset); step < end; step++) {
    const word = words[step]!;
    const other = others[step + offset]!;
    if (word === 0 || other === 0) continue;
    comparedSteps++;
    differing += setBits(word ^ other);
  }
  const bitErrorShare = comparedSteps > 0 ? differing / (comparedSteps * WORD_BITS) : 1;
  return { offset, bitErrorShare, comparedSteps };
}

function setBits(word: number): number {
  let count = 0;
  for (let left = word; left !== 0; left &= left - 1) count++;
  return count;
}
