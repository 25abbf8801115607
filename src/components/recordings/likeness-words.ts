import type { Likeness } from '@shared/contract/recordings.ts';
import { formatDuration } from '@/composables/useFormat.ts';

/** Offsets under a step of the fingerprint mean nothing. */
const leastOffsetS = 0.2;

function shiftWords(offsetS: number): string {
  if (Math.abs(offsetS) < leastOffsetS) return '';
  const shift = formatDuration(Math.abs(offsetS), 2);
  return offsetS > 0 ? `; it begins ${shift} into the other` : `; the other begins ${shift} into it`;
}

function channelWords({ channel, otherChannel }: Likeness, channels: number): string {
  if (channels === 1 && otherChannel === 0) return '';
  return ` (channel ${channel}, there channel ${otherChannel})`;
}

/** How another recording is like this one, in half a sentence. */
export function likenessWords(likeness: Likeness, channels: number): string {
  if (likeness.kind === 'same-file') return 'The very same file.';
  if (likeness.kind === 'same-samples') {
    return `The same samples in another file${channelWords(likeness, channels)}.`;
  }
  return `Sounds like a copy, or like a part of one${channelWords(likeness, channels)}${shiftWords(likeness.offsetS)}.`;
}
