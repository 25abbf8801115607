import { computed, onScopeDispose } from 'vue';
import { v7 as newId } from 'uuid';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { createMarkLedger } from '@/composables/bench/mark-ledger.ts';
import type { ShownMark } from '@/composables/bench/mark-ledger.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { saveWords } from '@/composables/bench/save-words.ts';
import { useOutboxStore } from '@/composables/outbox/useOutboxStore.ts';
import { useSessionStore } from '@/stores/session.ts';

export interface MarkSavingOptions {
  recordingId: string;
  /** Of the open pass of this person; empty without one. */
  passId: string;
  title: string;
  sampleRateHz: number;
  events: readonly RecordingEvent[];
  onShow: (key: string, mark: ShownMark) => void;
}

/** Stores marks as they are made and says how far that has come. */
export function useMarkSaving({
  recordingId,
  passId,
  title,
  sampleRateHz,
  events,
  onShow,
}: MarkSavingOptions) {
  const outbox = useOutboxStore();
  const personId = useSessionStore().user?.id ?? '';
  const place = { personId, recordingId, passId, title, sampleRateHz };
  const ledger = createMarkLedger({
    passId,
    newId,
    put: (change) => void outbox.put(change, place),
    isWriting: (id) => outbox.writingIds.includes(id),
    onShow,
  });
  ledger.begin(events, outbox.recent, outbox.entries);
  onScopeDispose(outbox.onTold(ledger.hear));

  const pending = computed(() => outbox.entries.filter((entry) => entry.place.passId === passId));
  const writingIds = computed(() => outbox.writingIds.filter(ledger.isHere));
  return {
    storedId: ledger.storedId,
    keep: (key: string, mark: MarkFields) => ledger.want(key, mark),
    remove: (key: string) => ledger.want(key, null),
    /** What the server stored, or took away, together with something else. */
    adopt: ledger.adopt,
    forget: ledger.forget,
    retry: () => outbox.retry(),
    decide: (id: string, choice: 'mine' | 'theirs') => void outbox.decide(id, choice),
    /** Also of earlier passes of this person on the recording: what was refused there is not forgotten. */
    undecided: computed(() => outbox.undecided.filter((entry) => entry.place.recordingId === recordingId)),
    isAllStored: computed(() => pending.value.length === 0 && writingIds.value.length === 0),
    words: (markCount: number) =>
      saveWords({
        entries: pending.value,
        writingIds: writingIds.value,
        halt: outbox.halt,
        isDurable: outbox.isDurable,
        markCount,
      }),
  };
}
