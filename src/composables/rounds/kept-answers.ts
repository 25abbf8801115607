import { z } from 'zod';
import { roundAnswerSchema } from '@shared/contract/rounds.ts';
import type { AnswerPacket } from '@/composables/rounds/answer-queue.ts';

const packetSchema = z.object({
  id: z.string(),
  name: z.string(),
  answers: z.array(roundAnswerSchema),
});

/**
 * Answers that are not stored yet, in the storage of the browser, an entry for each press, so that two windows do not write over
 * each other. Written at once, before the next candidate is shown: a press survives the end of the page.
 */
export function createKeptAnswers(passId: string, storage: Storage) {
  const prefix = `recalesce.answers.${passId}.`;

  function read(key: string): AnswerPacket | null {
    try {
      const parsed = packetSchema.safeParse(JSON.parse(storage.getItem(key) ?? ''));
      return parsed.success ? parsed.data : null;
    } catch {
      return null;
    }
  }

  return {
    /** False where the browser has no room, or keeps nothing. */
    keep(packet: AnswerPacket): boolean {
      try {
        storage.setItem(prefix + packet.id, JSON.stringify(packet));
        return true;
      } catch {
        return false;
      }
    },
    forget(packetId: string): void {
      storage.removeItem(prefix + packetId);
    },
    /** In the order in which they were given: their ids rise. */
    all(): AnswerPacket[] {
      const keys = Array.from({ length: storage.length }, (_value, index) => storage.key(index) ?? '');
      return keys
        .filter((key) => key.startsWith(prefix))
        .sort()
        .map(read)
        .filter((packet) => packet !== null);
    },
  };
}
