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
  /** On their way before they are asked for. */
  const ahead = new Map<string, Promise<AudioBuffer>>();

  function keep(entry: Kept): void {
    kept = [entry, ...kept.filter(({ key }) => key !== entry.key)];
    while (kept.length > 1 && kept.reduce((sum, { buffer }) => sum + buffer.duration, 0) > MOST_KEPT_S)
      kept.pop();
  }

  async function fetchOne(
    context: BaseAudioContext,
    query: RenditionQuery,
    signal?: AbortSignal,
  ): Promise<AudioBuffer> {
    return context.decodeAudioData(await getRendition(recordingId, query, signal));
  }

  async function load(
    context: BaseAudioContext,
    query: RenditionQuery,
    signal: AbortSignal,
  ): Promise<AudioBuffer> {
    const key = JSON.stringify(query);
    const known = kept.find((entry) => entry.key === key);
    const buffer = known?.buffer ?? (await (ahead.get(key) ?? fetchOne(context, query, signal)));
    signal.throwIfAborted();
    keep({ key, buffer });
    return buffer;
  }

  /** Fetches what will be asked for. What fails here is tried again then. */
  async function prefetch(context: BaseAudioContext, query: RenditionQuery): Promise<void> {
    const key = JSON.stringify(query);
    if (ahead.has(key) || kept.some((entry) => entry.key === key)) return;
    const asked = fetchOne(context, query);
    ahead.set(key, asked);
    try {
      keep({ key, buffer: await asked });
    } catch {
      // Nobody waits for it yet.
    } finally {
      ahead.delete(key);
    }
  }

  return { load, prefetch };
}
