import { useClipboard } from '@vueuse/core';
import { useAnnounce } from '@/composables/useAnnounce.ts';

/** Copies a text and says so. */
export function useCopy(name: string) {
  const { copy: toClipboard, copied } = useClipboard({ legacy: true });
  const { announce } = useAnnounce();

  async function copy(text: string): Promise<void> {
    await toClipboard(text);
    await announce(`${name} copied`);
  }

  return { wasCopied: copied, copy };
}
