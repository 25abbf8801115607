import { useEventListener } from '@vueuse/core';
import { watch } from 'vue';
import type { Ref } from 'vue';
import type { Halt } from '@/composables/outbox/sending-loop.ts';
import { useSessionStore } from '@/stores/session.ts';

export interface SendingTimes {
  halt: Ref<Halt>;
  retry: () => void;
  /** Whether something would be lost with the page. */
  isUnsafe: () => boolean;
}

/** What waits is tried again when that may help, and the page does not end while something is only in its memory. */
export function useSendingTimes({ halt, retry, isUnsafe }: SendingTimes): void {
  const session = useSessionStore();
  watch(
    () => session.hasEnded,
    (hasEnded) => {
      if (!hasEnded) retry();
    },
  );
  // Whether there is a network is only a hint: a server on the same machine is reached without one.
  useEventListener(window, 'online', retry);
  useEventListener(document, 'visibilitychange', () => {
    if (document.visibilityState === 'visible' && halt.value !== 'signed-out') retry();
  });
  useEventListener(window, 'beforeunload', (event: BeforeUnloadEvent) => {
    if (isUnsafe()) event.preventDefault();
  });
  watch(halt, (reason) => {
    if (reason !== 'none') keepThroughShortage().catch(() => undefined);
  });
}

/** Asked for when something has to wait: a browser that is short of room must not clear it away. */
async function keepThroughShortage(): Promise<void> {
  const storage = (navigator as Partial<Navigator>).storage;
  if (storage && !(await storage.persisted())) await storage.persist();
}

export function waitFor(delayMs: number, run: () => void): () => void {
  const timer = setTimeout(run, delayMs);
  return () => clearTimeout(timer);
}
