import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import type { CompletionService } from './completion.service.ts';
import type { UploadFolder } from './upload-folder.ts';
import { closeUpload, isClosedUpload, selectExpiredUploads } from './uploads.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock'> & { completion: CompletionService; folder: UploadFolder };

const closedPerSweep = 100;
const strayLifeMs = 24 * 60 * 60_000;

export type UploadSweepService = ReturnType<typeof createUploadSweepService>;

/** Clears what nobody goes on with. The upload package's own clean-up is never used: it removes finished files. */
export function createUploadSweepService({ db, clock, completion, folder }: Parts) {
  /** Ends uploads whose time is over, then removes files that belong to no open upload; returns how many ended. */
  async function sweep(): Promise<number> {
    const expired = selectExpiredUploads(db, clock.nowMs(), closedPerSweep);
    const ended = expired.filter(
      ({ id }) => !completion.isRunning(id) && write(db, (tx) => closeUpload(tx, id, 'expired')),
    );
    for (const { id } of ended) await folder.remove(id);
    for (const name of await folder.names()) {
      if (await isStray(name)) await folder.remove(name);
    }
    return ended.length;
  }

  async function isStray(name: string): Promise<boolean> {
    if (isClosedUpload(db, name)) return true;
    return name.startsWith('form-') && clock.nowMs() - (await folder.mtimeMs(name)) > strayLifeMs;
  }

  return { sweep };
}
