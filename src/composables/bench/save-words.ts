import type { Halt, QueueEntry } from '@/composables/bench/save-queue.ts';

export type SaveState = 'stored' | 'saving' | 'unsent' | 'undecided';

export interface SaveWords {
  state: SaveState;
  text: string;
}

function marks(count: number): string {
  return count === 1 ? '1 mark' : `${count} marks`;
}

const HALT_WORDS: Readonly<Record<Exclude<Halt, 'none'>, string>> = {
  unreachable: 'the server cannot be reached; it is tried again',
  'signed-out': 'sign in again',
};

/** How far the marks are stored, in one line that stands in the head of the bench. */
export function saveWords(entries: readonly QueueEntry[], halt: Halt, markCount: number): SaveWords {
  const undecided = entries.filter(({ state }) => state === 'conflict' || state === 'refused');
  if (undecided.length > 0)
    return { state: 'undecided', text: `Not stored: ${marks(undecided.length)} to decide on` };
  if (entries.length > 0 && halt !== 'none')
    return { state: 'unsent', text: `Not stored yet: ${marks(entries.length)}, ${HALT_WORDS[halt]}` };
  if (entries.length > 0) return { state: 'saving', text: `Saving ${marks(entries.length)}` };
  if (markCount === 0) return { state: 'stored', text: 'No marks yet' };
  return { state: 'stored', text: markCount === 1 ? 'The mark is stored' : `All ${markCount} marks stored` };
}
