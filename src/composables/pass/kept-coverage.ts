import { coverageSpanSchema } from '@shared/contract/coverage.ts';
import type { CoverageSpan } from '@shared/contract/coverage.ts';

export interface CoveragePlace {
  /** Who looked and listened. */
  personId: string;
  passId: string;
  /** Of the open page, so that two windows do not write over each other. */
  windowId: string;
}

const PREFIX = 'recalesce.coverage.';
/** About 400 kB. Of more, the longest are kept: what was seen is then told too small, never too large. */
const MOST_KEPT = 4000;
const keptSchema = coverageSpanSchema.array();

/**
 * What is not stored yet, in the storage of the browser, for one person and pass. What earlier windows left there is taken over
 * and cleared away once nothing waits any more, unless it has changed since. A full or closed storage stops nobody from
 * working: then it is kept in memory alone.
 */
export function createKeptCoverage({ personId, passId, windowId }: CoveragePlace, storage: Storage) {
  const ofPass = `${PREFIX}${personId}.${passId}.`;
  const taken = new Map<string, string>();

  function read(): CoverageSpan[] {
    return keysIn(storage, ofPass).flatMap((key) => {
      const text = storage.getItem(key) ?? '';
      taken.set(key, text);
      return parsed(text);
    });
  }

  function clear(): void {
    storage.removeItem(ofPass + windowId);
    for (const [key, text] of taken) if (storage.getItem(key) === text) storage.removeItem(key);
    taken.clear();
  }

  function write(spans: readonly CoverageSpan[]): void {
    try {
      if (spans.length === 0) clear();
      else storage.setItem(ofPass + windowId, JSON.stringify(longestOf(spans)));
    } catch {
      // Kept in memory alone, then.
    }
  }

  return { read, write };
}

/** Passes of this person for which something waits in this browser. */
export function passesKept(personId: string, storage: Storage): string[] {
  const ofPerson = `${PREFIX}${personId}.`;
  const ids = keysIn(storage, ofPerson).map((key) => key.slice(ofPerson.length).split('.')[0] ?? '');
  return [...new Set(ids)];
}

function longestOf(spans: readonly CoverageSpan[]): readonly CoverageSpan[] {
  if (spans.length <= MOST_KEPT) return spans;
  return spans.toSorted((a, b) => lengthOf(b) - lengthOf(a)).slice(0, MOST_KEPT);
}

const lengthOf = ({ startSample, endSample }: CoverageSpan) => endSample - startSample;

function keysIn(storage: Storage, prefix: string): string[] {
  const keys = Array.from({ length: storage.length }, (_value, index) => storage.key(index) ?? '');
  return keys.filter((key) => key.startsWith(prefix)).sort();
}

function parsed(text: string): CoverageSpan[] {
  try {
    return keptSchema.parse(JSON.parse(text));
  } catch {
    return [];
  }
}
