import { useClipboard } from '@vueuse/core';
import { ref } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import type { Bench } from '@/composables/bench/useBench.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

/** An address that opens the bench at a mark, and what happens where one was opened. */
export function useMarkLink({ recording, marks, view, selectMark }: Bench) {
  const route = useRoute();
  const router = useRouter();
  const { copy: toClipboard } = useClipboard({ legacy: true });
  const { announce } = useAnnounce();
  /** What went wrong with a link, or came of copying one. */
  const linkWords = ref('');
  const isLinkLost = ref(false);

  function tell(words: string, isLost = false): void {
    linkWords.value = words;
    isLinkLost.value = isLost;
    void announce(words);
  }

  async function copyLink(): Promise<void> {
    const mark = marks.selected.value;
    if (!mark) return tell('Select a mark to copy a link to it.');
    const id = marks.storedId(mark.key);
    if (id === null) return tell('This mark is not stored yet: its link can be copied as soon as it is.');
    const { startSample, endSample } = view.shown.value;
    const part = { from: String(Math.floor(startSample)), to: String(Math.ceil(endSample)) };
    const { href } = router.resolve({
      name: 'bench',
      params: { recordingId: recording.id },
      query: { mark: id, ...part },
    });
    const address = new URL(href, window.location.href).href;
    try {
      await toClipboard(address);
      tell('Link to the mark copied.');
    } catch {
      tell(`The browser did not let the link be copied: ${address}`);
    }
  }

  /** Once, when the bench opens: the mark is taken in hand, and leaves the address, which is of the window. */
  function openLink(): void {
    const { mark: id, ...rest } = route.query;
    if (typeof id !== 'string') return;
    const mark = marks.find(id);
    if (!mark)
      return tell(
        'The mark of this link is not here. It may have been deleted, or belong to a pass whose marks you may not see.',
        true,
      );
    if (rest.from === undefined) view.showAround(mark);
    selectMark(mark.key);
    void router.replace({ query: rest });
  }

  return { linkWords, isLinkLost, copyLink, openLink, dropLinkWords: () => (linkWords.value = '') };
}
