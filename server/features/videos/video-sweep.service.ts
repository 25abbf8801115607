import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { createBytesTurn } from './kept-bytes.ts';
import { keptAfterRemovalMs } from './kept-bytes.ts';
import { deleteVideo, isNamedElsewhere, selectVideosRemovedBefore, type VideoRow } from './videos.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'store'> & {
  audit: AuditService;
  inTurn: ReturnType<typeof createBytesTurn>;
};

const sweptAtOnce = 100;

export type VideoSweepService = ReturnType<typeof createVideoSweepService>;

/** Takes the bytes of films that were removed long ago, unless something else has the same bytes. */
export function createVideoSweepService({ db, clock, store, audit, inTurn }: Parts) {
  /** Bytes first: what is interrupted is found again by its row. Returns how many films went. */
  async function sweep(): Promise<number> {
    const gone = selectVideosRemovedBefore(db, clock.nowMs() - keptAfterRemovalMs, sweptAtOnce);
    for (const row of gone) await inTurn(() => take(row));
    return gone.length;
  }

  async function take(row: VideoRow): Promise<void> {
    if (!isNamedElsewhere(db, row)) await store.delete(row.sha256);
    write(db, (tx) => {
      deleteVideo(tx, row.id);
      const { id, runId, sha256, sizeBytes } = row;
      const subject = { subjectType: 'Video', subjectId: id };
      audit.record(tx, {
        personId: null,
        action: 'video.swept',
        ...subject,
        detail: { runId, sha256, sizeBytes },
      });
    });
  }

  return { sweep };
}
