import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import type { Halt } from '@/composables/outbox/sending-loop.ts';

export type SaveState = 'stored' | 'saving' | 'unsent' | 'undecided';

export interface SaveWords {
  state: SaveState;
  text: string;
}

export interface SavingFacts {
  entries: readonly OutboxEntry[];
  /** Changes on their way into the storage of the browser. */
  writingIds: readonly string[];
  halt: Halt;
  /** False while something is only in the memory of this page. */
  isDurable: boolean;
  markCount: number;
}

export function marksWords(count: number): string {
  return count === 1 ? '1 mark' : `${count} marks`;
}

export const HALT_WORDS: Readonly<Record<Exclude<Halt, 'none'>, string>> = {
  unreachable: 'the server cannot be reached; it is tried again',
  busy: 'the server is busy; it is tried again',
  full: 'the server has no room left; it is tried again',
  failing: 'the server meets an error; it is tried again',
  'signed-out': 'sign in again',
};

/** How far the marks are stored, in one line that stands in the head of the bench. */
export function saveWords({ entries, writingIds, halt, isDurable, markCount }: SavingFacts): SaveWords {
  const waiting = entries.filter(({ state }) => state === 'waiting');
  const undecided = entries.length - waiting.length;
  if (undecided > 0) return { state: 'undecided', text: `Not stored: ${marksWords(undecided)} to decide on` };
  const count = new Set([...waiting.map(({ id }) => id), ...writingIds]).size;
  if (count > 0 && halt !== 'none')
    return { state: 'unsent', text: `${keptWords(isDurable)}, ${count} waiting: ${HALT_WORDS[halt]}` };
  if (count > 0) return { state: 'saving', text: `Saving ${marksWords(count)}` };
  if (markCount === 0) return { state: 'stored', text: 'No marks yet' };
  return { state: 'stored', text: markCount === 1 ? 'The mark is stored' : `All ${markCount} marks stored` };
}

/** A browser without storage, or without room: then the page must stay open. */
function keptWords(isDurable: boolean): string {
  return isDurable ? 'Kept here' : 'Kept in this page only (the browser stores nothing; keep it open)';
}
