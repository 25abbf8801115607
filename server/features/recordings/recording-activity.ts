import type { ActivityHub } from '../../jobs/activity.ts';
import type { RecordingRow } from './recordings.queries.ts';

type Told = Pick<RecordingRow, 'id' | 'labId' | 'processing' | 'sharing' | 'progress'>;

/** Its lab hears of every state; curators, who assign, of what is shared. */
export function announceRecording(
  activity: ActivityHub,
  { id, labId, processing, sharing, progress }: Told,
): void {
  const audience = sharing === 'shared' ? { labId, roles: ['curator' as const] } : { labId };
  activity.publish({ topic: 'recording', id, processing, sharing, progress }, audience);
}
