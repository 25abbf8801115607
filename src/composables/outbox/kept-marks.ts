import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';

/** What lies in the outbox as a text that somebody can keep, read and enter again: JSON, times as integer samples. */
export function keptMarksText(entries: readonly OutboxEntry[]): string {
  const marks = entries.map(({ id, place, wish, base, state, sentence, theirs, sinceMs }) => ({
    id,
    recordingId: place.recordingId,
    passId: place.passId,
    run: place.title,
    sampleRateHz: place.sampleRateHz,
    keptSince: new Date(sinceMs).toISOString(),
    state,
    ...(sentence && { refusedWith: sentence }),
    wanted: wish ?? 'deleted',
    stored: theirs ?? base?.mark ?? 'nothing known',
  }));
  return `${JSON.stringify({ format: 'recalesce-kept-marks-1', marks }, null, 2)}\n`;
}

/** What waits, by the pass it belongs to, in the order in which it was marked. */
export interface KeptPass {
  recordingId: string;
  passId: string;
  title: string;
  entries: OutboxEntry[];
  undecidedCount: number;
}

export function byPass(entries: readonly OutboxEntry[]): KeptPass[] {
  const passes = new Map<string, KeptPass>();
  for (const entry of entries) {
    const { recordingId, passId, title } = entry.place;
    const pass = passes.get(passId) ?? { recordingId, passId, title, entries: [], undecidedCount: 0 };
    pass.entries.push(entry);
    if (entry.state !== 'waiting') pass.undecidedCount++;
    passes.set(passId, pass);
  }
  return [...passes.values()];
}
