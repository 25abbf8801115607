import type { Total } from '@shared/contract/page.ts';
import { formatCount, formatNumber, formatTotal } from '@/composables/useFormat.ts';

export interface AddingFacts {
  total: Total;
  /** How many of the matching recordings are known by name here. */
  shownCount: number;
  /** How many of those are in the collection. */
  presentCount: number;
  /** Whether every member of the collection is known here. */
  areMembersKnown: boolean;
}

export interface AddingCount {
  /** Recordings that would be added, at most. */
  fresh: number;
  /** False where not all of them could be compared with what is in. */
  isExact: boolean;
}

/** How many recordings taking all that match would add. */
export function countToAdd({ total, shownCount, presentCount, areMembersKnown }: AddingFacts): AddingCount {
  const isWhole = !total.capped && shownCount >= total.count;
  return { fresh: total.count - presentCount, isExact: isWhole && areMembersKnown };
}

/** What the filter finds and what taking all of it would add, in a sentence. */
export function addingSentence(facts: AddingFacts): string {
  const { total, presentCount } = facts;
  if (total.count === 0) return 'No shared recording matches.';
  const found = `${formatTotal(total)} shared ${total.count === 1 ? 'recording matches' : 'recordings match'}`;
  const { fresh, isExact } = countToAdd(facts);
  if (fresh === 0) return `${found}; all of them are in already.`;
  const would = isExact
    ? `${formatNumber(fresh)} would be added`
    : `up to ${formatNumber(fresh)} would be added`;
  return presentCount > 0
    ? `${found}; ${would}, ${formatNumber(presentCount)} are in already.`
    : `${found}; ${would}.`;
}

/** What was done, once it was done. */
export function addedWords({ added, alreadyIn }: { added: number; alreadyIn: number }): string {
  const head = added === 0 ? 'Nothing was added' : `${formatCount(added, 'recording')} added`;
  if (alreadyIn === 0) return `${head}.`;
  return `${head}; ${formatNumber(alreadyIn)} ${alreadyIn === 1 ? 'was' : 'were'} in already.`;
}
