import { useAnnounce } from '@/composables/useAnnounce.ts';
import { keptMarksText } from '@/composables/outbox/kept-marks.ts';
import type { OutboxEntry } from '@/composables/outbox/outbox-entry.ts';

const FILE_NAME = 'recalesce-kept-marks.json';

/** Ways to take marks out of this browser by hand. */
export function useKeptMarks() {
  const { announce } = useAnnounce();

  /** A page without a secure connection has no clipboard; a file works everywhere. */
  async function copy(entries: readonly OutboxEntry[]): Promise<void> {
    try {
      await navigator.clipboard.writeText(keptMarksText(entries));
      await announce('Copied');
    } catch {
      download(entries);
    }
  }

  function download(entries: readonly OutboxEntry[]): void {
    const address = URL.createObjectURL(new Blob([keptMarksText(entries)], { type: 'application/json' }));
    const link = document.createElement('a');
    link.href = address;
    link.download = FILE_NAME;
    link.click();
    URL.revokeObjectURL(address);
    void announce(`Saved as ${FILE_NAME}`);
  }

  return { copy, download };
}
