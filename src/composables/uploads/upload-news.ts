import type { UploadItem, UploadStage } from '@/composables/uploads/upload-item.ts';

type Told = Pick<UploadItem, 'key' | 'fileName' | 'sizeBytes' | 'sentBytes' | 'stage' | 'message'>;

const stageNews: Partial<Record<UploadStage, string>> = {
  undeclared: 'needs its layout declared',
  refused: 'refused',
  sending: 'is being sent',
  paused: 'paused',
  lost: 'connection lost',
  checking: 'has arrived',
  measured: 'measured',
  failed: 'failed',
  cancelled: 'cancelled',
};

/** Coarse on purpose: a listener wants to know that it moves, not each percent. */
function quarter({ sentBytes, sizeBytes }: Told): number {
  return Math.floor((4 * sentBytes) / sizeBytes);
}

function newsOf(before: Told | undefined, now: Told): string {
  if (before?.stage !== now.stage) {
    const news = stageNews[now.stage];
    if (news === undefined) return '';
    return now.stage === 'refused' ? `${now.fileName} refused: ${now.message}` : `${now.fileName} ${news}`;
  }
  const isFurther = now.stage === 'sending' && before !== undefined && quarter(now) > quarter(before);
  return isFurther && quarter(now) < 4 ? `${now.fileName}: ${25 * quarter(now)} % sent` : '';
}

/** What a screen reader is told of a change in the list of uploads; empty where it is not worth a word. */
export function uploadNews(before: readonly Told[], now: readonly Told[]): string {
  const byKey = new Map(before.map((item) => [item.key, item]));
  return now
    .map((item) => newsOf(byKey.get(item.key), item))
    .filter((news) => news !== '')
    .join('. ');
}
