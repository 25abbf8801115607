import type { Recording } from '@shared/contract/recordings.ts';

/** What is measured once more stays measured meanwhile; only its progress is not complete. */
export function isMeasuredAgain({
  processing,
  progress,
}: Pick<Recording, 'processing' | 'progress'>): boolean {
  return processing === 'measured' && progress < 1;
}
