import { setImmediate as nextTurn } from 'node:timers/promises';
import type { BlockReader } from '../../measuring/block-reader.ts';
import { NoiseProfiler, type NoiseProfile } from '../../signal/noise-profile.ts';
import type { QuietSpan } from '../../signal/quiet-span.ts';

/** Frames of a span that are looked at; of a long one they are spread over it. */
const mostFrames = 256;
/** Fewer frames tell no noise from what happens to sound in them. */
const leastFrames = 3;
const framesPerTurn = 16;

/** Samples that a span of noise must have for frames of this size; half of a frame lies between two. */
export function leastNoiseSamples(size: number): number {
  return size + (leastFrames - 1) * (size / 2);
}

/** @param span at least `leastNoiseSamples` long, inside the recording */
export async function readNoiseProfile(
  reader: BlockReader,
  place: { channel: number; span: QuietSpan; size: number },
): Promise<NoiseProfile> {
  const { channel, span, size } = place;
  const room = span.endSample - span.startSample - size;
  const count = Math.min(mostFrames, Math.floor(room / (size / 2)) + 1);
  const profiler = new NoiseProfiler(size);
  for (let n = 0; n < count; n++) {
    const first = span.startSample + Math.floor((n * room) / Math.max(1, count - 1));
    profiler.push(await reader.readChannel(channel, first, size));
    if (n % framesPerTurn === 0) await nextTurn();
  }
  return profiler.finish();
}
