import { defineStore } from 'pinia';
import { shallowRef, watch } from 'vue';
import type { Answered } from '@shared/contract/rounds.ts';
import { createIndexedStore } from '@/composables/outbox/indexed-store.ts';
import { oneSender } from '@/composables/outbox/one-sender.ts';
import { guardStore } from '@/composables/outbox/outbox-store.ts';
import { plain } from '@/composables/outbox/plain.ts';
import type { Halt } from '@/composables/outbox/sending-loop.ts';
import { createTabChannel } from '@/composables/outbox/tab-channel.ts';
import { useSendingTimes, waitFor } from '@/composables/outbox/useSendingTimes.ts';
import { createAnswerOutbox } from '@/composables/rounds/answer-outbox.ts';
import type { AnswerNews, AnswerOutbox } from '@/composables/rounds/answer-outbox.ts';
import type { AnswerPacket, StoredPlace } from '@/composables/rounds/answer-packet.ts';
import { sendPacket } from '@/composables/rounds/send-answers.ts';
import { useSessionStore } from '@/stores/session.ts';

const NAME = 'recalesce-answers';

type StoredListener = (answered: readonly Answered[], passId: string) => void;

/** The answers of whoever is signed in that wait in this browser. Works on every page, so that they go out wherever one is. */
export const useAnswerOutboxStore = defineStore('answer-outbox', () => {
  const session = useSessionStore();
  const kept = guardStore(createIndexedStore<AnswerPacket>('answers'));
  const channel = createTabChannel<AnswerNews>(NAME);
  const packets = shallowRef<readonly AnswerPacket[]>([]);
  const halt = shallowRef<Halt>('none');
  const isDurable = shallowRef(true);
  const othersCount = shallowRef(0);
  const listeners = new Set<StoredListener>();
  let outbox: AnswerOutbox | null = null;
  let loading = Promise.resolve();

  function begin(personId: string): AnswerOutbox {
    return createAnswerOutbox({
      personId,
      store: kept,
      channel,
      send: sendPacket,
      alone: (work) => oneSender(personId, work, NAME),
      wait: waitFor,
      random: Math.random,
      onStored: (answered, passId) => {
        for (const listener of listeners) listener(answered, passId);
      },
      onChange: show,
    });
  }

  function show(): void {
    packets.value = outbox?.packets() ?? [];
    halt.value = outbox?.halt() ?? 'none';
    isDurable.value = kept.isDurable();
  }

  async function load(begun: AnswerOutbox): Promise<void> {
    const count = await begun.load();
    if (begun === outbox) othersCount.value = count;
  }

  function changePerson(personId: string | undefined): void {
    outbox?.stop();
    outbox = personId === undefined ? null : begin(personId);
    othersCount.value = 0;
    show();
    if (outbox) loading = load(outbox);
  }

  /** Resolves when what had waited of a pass is stored, or cannot be at the moment. */
  async function settle(passId: string): Promise<void> {
    await loading;
    const isSettled = () =>
      halt.value !== 'none' ||
      packets.value.every(({ place, state }) => place.passId !== passId || state !== 'waiting');
    await new Promise<void>((resolve) => {
      const stop = watch(
        [packets, halt],
        () => {
          if (!isSettled()) return;
          queueMicrotask(() => stop());
          resolve();
        },
        { immediate: true, flush: 'sync' },
      );
    });
  }

  watch(() => session.user?.id, changePerson, { immediate: true, flush: 'sync' });
  useSendingTimes({
    halt,
    retry: () => outbox?.retry(),
    isUnsafe: () => outbox?.isWriting() === true || !isDurable.value,
  });

  return {
    packets,
    halt,
    isDurable,
    /** Answers of other people who used this browser. */
    othersCount,
    settle,
    add: async (packet: AnswerPacket) => {
      const own =
        outbox && session.user?.id === packet.place.personId ? outbox : begin(packet.place.personId);
      if (own !== outbox) own.stop();
      await own.add(plain(packet));
    },
    adopt: (candidateId: string, place: StoredPlace) => outbox?.adopt(candidateId, place),
    decide: async (id: string, choice: 'mine' | 'theirs') => outbox?.decide(id, choice),
    retry: () => outbox?.retry(),
    /** Calls the listener with what the server stored. Returns the way to stop it. */
    onStored(listener: StoredListener): () => void {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
});
