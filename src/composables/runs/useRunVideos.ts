import { useQuery, useQueryClient } from '@tanstack/vue-query';
import { computed, ref, shallowRef, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import { mostVideoBytes } from '@shared/contract/videos.ts';
import type { PatchVideo, Video } from '@shared/contract/videos.ts';
import { deleteVideo, filmAddress, listVideos, patchVideo, restoreVideo, sendVideo } from '@/api/videos.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

export type RunVideos = ReturnType<typeof useRunVideos>;

/** The films of a run: brought in one at a time, placed on its clock, removed and brought back. */
export function useRunVideos(runId: MaybeRefOrGetter<string>) {
  const queries = useQueryClient();
  const { announce } = useAnnounce();
  const key = computed(() => ['videos', toValue(runId)]);
  const query = useQuery({ queryKey: key, queryFn: ({ signal }) => listVideos(toValue(runId), signal) });
  const error = shallowRef<unknown>(null);
  const sending = shallowRef<{ name: string; share: number } | null>(null);
  const removed = shallowRef<Video | null>(null);
  const notice = ref('');
  let giveUp: AbortController | null = null;

  const reload = () => queries.invalidateQueries({ queryKey: key.value });

  /** Answers whether it was done; what went wrong stands in `error`. */
  async function attempt(work: () => Promise<string>): Promise<boolean> {
    error.value = null;
    try {
      const words = await work();
      await reload();
      notice.value = words;
      void announce(words);
      return true;
    } catch (problem) {
      const isGivenUp = problem instanceof DOMException && problem.name === 'AbortError';
      if (!isGivenUp) error.value = problem;
      notice.value = isGivenUp ? 'Given up; nothing of it was kept.' : '';
      void reload();
      return false;
    }
  }

  async function send(file: File): Promise<boolean> {
    notice.value = '';
    if (file.size > mostVideoBytes) {
      error.value = new Error('A film may have 4 GB at most. Bring in the part that matters.');
      return false;
    }
    giveUp = new AbortController();
    const { signal } = giveUp;
    const onProgress = (sent: number) => (sending.value = { name: file.name, share: sent / file.size });
    sending.value = { name: file.name, share: 0 };
    const isSent = await attempt(async () => {
      const video = await sendVideo({ runId: toValue(runId), file, signal, onProgress });
      return video.isSoundLeftOut ? `${file.name} is kept without its sound.` : `${file.name} is kept.`;
    });
    sending.value = null;
    return isSent;
  }

  return {
    items: computed(() => query.data.value?.items ?? []),
    isWithheld: computed(() => query.data.value?.isWithheld ?? false),
    mayAdd: computed(() => query.data.value?.mayAdd ?? false),
    isLoaded: computed(() => query.data.value !== undefined),
    loadError: query.error,
    reload,
    error,
    sending,
    removed,
    notice,
    send,
    cancel: () => giveUp?.abort(),
    place: (video: Video, values: PatchVideo) =>
      attempt(async () => {
        await patchVideo(video.id, video.revision, values);
        return `The place of ${video.fileName} in the run is set.`;
      }),
    remove: (video: Video) =>
      attempt(async () => {
        await deleteVideo(video.id, video.revision);
        removed.value = { ...video, revision: video.revision + 1 };
        return `${video.fileName} is removed.`;
      }),
    restore: () =>
      attempt(async () => {
        const video = removed.value;
        if (!video) return '';
        await restoreVideo(video.id, video.revision);
        removed.value = null;
        return `${video.fileName} is back.`;
      }),
    addressOf: (video: Video) => filmAddress(video.id),
    downloadOf: (video: Video) => filmAddress(video.id, true),
  };
}
