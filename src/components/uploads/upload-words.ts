import type { UploadItem, UploadStage } from '@/composables/uploads/upload-item.ts';
import type { FileReading } from '@/composables/uploads/read-recording-file.ts';
import { secondsLeft } from '@/composables/uploads/transfer-rate.ts';
import { formatBytes, formatDuration, formatShare } from '@/composables/useFormat.ts';

export const stageWords: Readonly<Record<UploadStage, string>> = {
  reading: 'is being read',
  undeclared: 'needs its layout',
  refused: 'cannot be brought in',
  ready: 'ready to be sent',
  waiting: 'waits for its turn',
  sending: 'being sent',
  paused: 'paused',
  lost: 'interrupted',
  checking: 'has arrived, is being checked',
  measuring: 'being measured',
  measured: 'measured',
  failed: 'failed',
  cancelled: 'cancelled',
  missing: 'waits for its file',
};

const attentionStages: ReadonlySet<UploadStage> = new Set([
  'undeclared',
  'refused',
  'lost',
  'failed',
  'missing',
]);
const activeStages: ReadonlySet<UploadStage> = new Set(['sending', 'checking', 'measuring']);

export function toneOfStage(stage: UploadStage): 'plain' | 'melt' | 'glow' {
  if (attentionStages.has(stage)) return 'glow';
  return activeStages.has(stage) ? 'melt' : 'plain';
}

/** Rounded so that it does not jump: 12 s, 3 min, 2 h. */
function roughDuration(seconds: number): string {
  if (seconds < 90) return formatDuration(Math.max(1, Math.round(seconds)));
  const minutes = Math.round(seconds / 60);
  return minutes < 120 ? `${minutes}\u00A0min` : `${Math.round(minutes / 60)}\u00A0h`;
}

/** 40 MB of 172.8 MB, 8.2 MB/s, 16 s left. */
export function progressWords({ sentBytes, sizeBytes, bytesPerSecond, stage }: UploadItem): string {
  const sent = `${formatBytes(sentBytes)} of ${formatBytes(sizeBytes)}`;
  if (stage !== 'sending' || bytesPerSecond === null) return sent;
  const left = secondsLeft(sizeBytes - sentBytes, bytesPerSecond);
  const speed = `${sent}, ${formatBytes(Math.round(bytesPerSecond))}/s`;
  return left === null ? speed : `${speed}, ${roughDuration(left)} left`;
}

/** Of a film, how much of its sound is taken out: that takes as long as reading all of it. */
export function readWords({ sizeBytes, readShare }: UploadItem): string {
  const size = formatBytes(sizeBytes);
  return readShare > 0 ? `${size}, ${formatShare(readShare)} of its sound taken out` : size;
}

/** The bar of a row: how much of the sound of a film was taken out, how much was sent, then how much was measured. */
export function shareOf(item: UploadItem): number | null {
  if (item.stage === 'measuring') return item.measuredShare;
  if (item.stage === 'reading') return item.readShare > 0 ? item.readShare : null;
  const isShown = ['sending', 'paused', 'lost', 'checking', 'missing', 'waiting'].includes(item.stage);
  return isShown && item.sentBytes > 0 ? item.sentBytes / item.sizeBytes : null;
}

export function labelOfShare(item: UploadItem): string {
  if (item.stage === 'measuring') return `${item.fileName}, measured`;
  return item.stage === 'reading' ? `${item.fileName}, sound taken out` : `${item.fileName}, sent`;
}

/** What the header gives away, told before it is sent; empty where it gives away nothing. */
export function personalWarning({ findings }: FileReading): string {
  if (findings.length === 0) return '';
  const kinds = new Set(findings.map(({ kind }) => kind));
  const consequence = 'a reviewer will have to look at it before it can be shared.';
  if (kinds.has('person')) return `This file names a person in its header: ${consequence}`;
  if (kinds.has('place')) return `This file names a place in its header: ${consequence}`;
  return `This file carries text in its header that could name a person or a place: ${consequence}`;
}

export function measuredWords(share: number): string {
  return share > 0 ? `${formatShare(share)} measured` : 'The measurement starts by itself.';
}
