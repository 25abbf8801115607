import { defineStore } from 'pinia';
import { v7 as newId } from 'uuid';
import { computed, shallowRef, watch } from 'vue';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { createIndexedStore } from '@/composables/outbox/indexed-store.ts';
import { oneSender } from '@/composables/outbox/one-sender.ts';
import type { MarkChange, MarkPlace, OutboxEntry } from '@/composables/outbox/outbox-entry.ts';
import type { Halt } from '@/composables/outbox/sending-loop.ts';
import { guardStore } from '@/composables/outbox/outbox-store.ts';
import { createOutbox } from '@/composables/outbox/outbox.ts';
import type { Outbox, Told } from '@/composables/outbox/outbox.ts';
import { plain } from '@/composables/outbox/plain.ts';
import { sendMark } from '@/composables/outbox/send-mark.ts';
import { createTabChannel } from '@/composables/outbox/tab-channel.ts';
import { useSendingTimes, waitFor } from '@/composables/outbox/useSendingTimes.ts';
import { useSessionStore } from '@/stores/session.ts';

/** The marks of whoever is signed in that wait in this browser. Works on every page, so that they go out wherever one is. */
export const useOutboxStore = defineStore('outbox', () => {
  const session = useSessionStore();
  const kept = guardStore(createIndexedStore());
  const channel = createTabChannel();
  const entries = shallowRef<readonly OutboxEntry[]>([]);
  /** Changes on their way into the storage of the browser. */
  const writingIds = shallowRef<readonly string[]>([]);
  const halt = shallowRef<Halt>('none');
  const isDurable = shallowRef(true);
  const othersCount = shallowRef(0);
  const listeners = new Set<(told: Told) => void>();
  const recent = new Map<string, RecordingEvent | null>();
  let outbox: Outbox | null = null;

  function begin(personId: string): Outbox {
    return createOutbox({
      personId,
      store: kept,
      channel,
      send: sendMark,
      newId,
      alone: (work) => oneSender(personId, work),
      wait: waitFor,
      random: Math.random,
      nowMs: Date.now,
      onTold: tell,
      onChange: show,
    });
  }

  function tell(told: Told): void {
    if (told.event !== undefined) recent.set(told.event?.id ?? told.id, told.event);
    for (const listener of listeners) listener(told);
  }

  function show(): void {
    entries.value = outbox?.entries() ?? [];
    writingIds.value = outbox?.writingIds() ?? [];
    halt.value = outbox?.halt() ?? 'none';
    isDurable.value = kept.isDurable();
  }

  async function load(begun: Outbox): Promise<void> {
    const count = await begun.load();
    if (begun === outbox) othersCount.value = count;
  }

  function changePerson(personId: string | undefined): void {
    outbox?.stop();
    outbox = personId === undefined ? null : begin(personId);
    othersCount.value = 0;
    recent.clear();
    show();
    if (outbox) void load(outbox);
  }

  watch(() => session.user?.id, changePerson, { immediate: true, flush: 'sync' });
  useSendingTimes({
    halt,
    retry: () => outbox?.retry(),
    isUnsafe: () => writingIds.value.length > 0 || !isDurable.value,
  });

  return {
    entries,
    writingIds,
    halt,
    isDurable,
    /** Marks of other people who used this browser. */
    othersCount,
    undecided: computed(() => entries.value.filter(({ state }) => state !== 'waiting')),
    /** What the server was heard to have, by id, since marks were last fetched; `null` for what was removed. */
    recent: recent as ReadonlyMap<string, RecordingEvent | null>,
    /** Marks are about to be fetched: what is heard from now on may be newer than what comes. */
    forgetRecent: () => recent.clear(),
    put: async (change: MarkChange, place: MarkPlace) => {
      const own = outbox && session.user?.id === place.personId ? outbox : begin(place.personId);
      if (own !== outbox) own.stop();
      await own.put(plain(change), place);
    },
    decide: async (id: string, choice: 'mine' | 'theirs') => outbox?.decide(id, choice),
    retry: () => outbox?.retry(),
    isPending: (id: string) => outbox?.isPending(id) ?? false,
    /** Calls the listener at each change of a mark. Returns the way to stop it. */
    onTold(listener: (told: Told) => void): () => void {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
});
