import { getRendition } from '@/api/views.ts';
import type { RenditionQuery } from '@/api/views.ts';

/** Kept for going to and fro between ways of listening; 23 MB as samples. */
const MOST_KEPT_S = 120;

interface Kept {
  key: string;
  buffer: AudioBuffer;
}

/** Renditions as the server made them, decoded; the last ones are kept. */
export function createRenditionStore(recordingId: string) {
  let kept: Kept[] = [];

  function keep(entry: Kept): void {
    kept = [entry, ...kept.filter(({ key }) => key !== entry.key)];
    while (kept.length > 1 && kept.reduce((sum, { buffer }) => sum + buffer.duration, 0) > MOST_KEPT_S)
      kept.pop();
  }

  async function load(
    context: BaseAudioContext,
    query: RenditionQuery,
    signal: AbortSignal,
  ): Promise<AudioBuffer> {
    const key = JSON.stringify(query);
    const known = kept.find((entry) => entry.key === key);
    const buffer =
      known?.buffer ?? (await context.decodeAudioData(await getRendition(recordingId, query, signal)));
    signal.throwIfAborted();
    keep({ key, buffer });
    return buffer;
  }

  return { load };
}
