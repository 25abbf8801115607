import { tryOnScopeDispose, useEventListener, useIntervalFn } from '@vueuse/core';
import { computed, watch } from 'vue';
import { cancelUpload, completeUpload, createUpload, listUploads } from '@/api/uploads.ts';
import { transferBytes } from '@/api/upload-bytes.ts';
import { useActivity } from '@/composables/useActivity.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { hashFile } from '@/composables/uploads/hash-file.ts';
import { readChosenFile } from '@/composables/uploads/read-chosen-file.ts';
import { uploadNews } from '@/composables/uploads/upload-news.ts';
import { isInHand } from '@/composables/uploads/upload-item.ts';
import { createUploadQueue } from '@/composables/uploads/upload-queue.ts';
import { useSessionStore } from '@/stores/session.ts';

const retryEveryMs = 10_000;

/** The uploads of one page: what is open on the server joins, what is lost goes on, what is left is paused. */
export function useUploadQueue() {
  const session = useSessionStore();
  const { announce } = useAnnounce();
  const queue = createUploadQueue({
    read: readChosenFile,
    hash: hashFile,
    create: createUpload,
    transfer: transferBytes,
    complete: completeUpload,
    cancel: cancelUpload,
    nowMs: () => Date.now(),
  });

  /** Also the way in which an ended session is noticed: the bytes travel beside the client that would tell. */
  async function refresh(): Promise<void> {
    queue.adopt(await listUploads());
  }

  useActivity(queue.hear);
  useEventListener(window, 'online', () => queue.resumeLost());
  useIntervalFn(() => {
    if (navigator.onLine) queue.resumeLost();
  }, retryEveryMs);
  watch(
    () => queue.items.some((item) => item.stage === 'lost' && !item.retriesItself),
    (isStuck) => {
      if (isStuck) void refresh().catch(() => undefined);
    },
  );
  watch(
    () => session.hasEnded,
    (hasEnded) => {
      if (!hasEnded) queue.resumeLost(true);
    },
  );
  watch(
    () => queue.items.map((item) => ({ ...item })),
    (now, before) => {
      const news = uploadNews(before ?? [], now);
      if (news !== '') void announce(news);
    },
  );
  tryOnScopeDispose(() => void queue.stop());

  return { queue, refresh, isBusy: computed(() => queue.items.some(isInHand)) };
}
