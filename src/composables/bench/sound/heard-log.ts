import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

/** A stretch that was played to its end, half-open, in whole samples. */
export interface HeardSpan {
  channel: number;
  startSample: number;
  endSample: number;
  aids: ListeningAids;
}

interface Entry extends HeardSpan {
  atMs: number;
}

/** A mark belongs to what was heard so shortly before. */
const RECENT_MS = 60_000;
const MOST_ENTRIES = 500;

/** What was heard lately, and how. */
export function createHeardLog(nowMs: () => number = Date.now) {
  let entries: Entry[] = [];
  const listeners = new Set<(heard: HeardSpan) => void>();

  function add(heard: HeardSpan): void {
    if (heard.endSample <= heard.startSample) return;
    const recent = entries.filter(({ atMs }) => nowMs() - atMs <= RECENT_MS);
    entries = [...recent.slice(-MOST_ENTRIES), { ...heard, atMs: nowMs() }];
    for (const listener of listeners) listener(heard);
  }

  /** How this span was heard last, or `null` where it was not heard within the last minute. */
  function aidsFor(span: TimeWindow, channel: number): ListeningAids | null {
    const found = entries.findLast(
      (entry) =>
        entry.channel === channel &&
        nowMs() - entry.atMs <= RECENT_MS &&
        entry.startSample < span.endSample &&
        entry.endSample > span.startSample,
    );
    return found?.aids ?? null;
  }

  function onHeard(listener: (heard: HeardSpan) => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  }

  return { add, aidsFor, onHeard };
}
