import { nextTick, ref } from 'vue';

const spoken = ref('');

/** Says something to screen readers without moving the focus. The text is read by `AppLive` in the layout. */
export function useAnnounce() {
  async function announce(text: string): Promise<void> {
    // The same text twice is only read again when the region was empty in between.
    spoken.value = '';
    await nextTick();
    spoken.value = text;
  }
  return { announce, spoken };
}
