import { z } from 'zod';
import { idSchema } from '../../../shared/contract/ids.ts';
import { releaseSnapshotSchema } from '../../../shared/contract/release-snapshot.ts';
import type { ReleaseState } from '../../../shared/contract/releases.ts';
import { readFile } from 'node:fs/promises';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { defineJob, type JobContext, type JobHandler } from '../../jobs/registry.ts';
import type { BuiltArchive } from '../../packaging/build-archive.ts';
import { buildInWorker, type ArchivePool } from '../../packaging/build-in-worker.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { insertArtifact, selectRelease, updateRelease, type ReleaseRow } from './releases.queries.ts';

interface BuildParts extends Pick<Ground, 'db' | 'clock' | 'store' | 'activity' | 'config'> {
  audit: AuditService;
  pool: ArchivePool;
}

/** Builds the archive of a release from its snapshot; it appears, verified, before the row says so. */
export function buildReleaseJob({ db, clock, store, activity, config, audit, pool }: BuildParts): JobHandler {
  async function run({ releaseId }: { releaseId: string }, context: JobContext): Promise<void> {
    const release = selectRelease(db, releaseId)?.release;
    // Replaced by another try, or built by an earlier claim of this job.
    if (!release || release.state !== 'building') return;
    const onProgress = (fraction: number) => report(release, 'building', fraction, context);
    const built = await buildInWorker(pool, await taskOf(release), { onProgress, signal: context.signal });
    write(db, (tx) => {
      context.assertHeld(tx);
      insertArtifact(tx, toArtifact(releaseId, built));
      updateRelease(tx, releaseId, { state: 'built', progress: 1, failure: null });
      audit.record(
        tx,
        entryOf(releaseId, 'release.built', { sha256: built.sha256, version: release.version }),
      );
    });
    tell(releaseId, 'built', 1);
  }

  async function taskOf(release: ReleaseRow) {
    const snapshotPath = store.pathOf(release.snapshotSha256);
    const snapshot = releaseSnapshotSchema.parse(JSON.parse(await readFile(snapshotPath, 'utf8')));
    const audioPaths = Object.fromEntries(
      snapshot.recordings.map(({ sha256 }) => [sha256, store.pathOf(sha256)]),
    );
    return { snapshotPath, audioPaths, outDir: config.paths.archives };
  }

  function toArtifact(releaseId: string, { fileName, sizeBytes, sha256, files }: BuiltArchive) {
    return { releaseId, fileName, sizeBytes, sha256, files, verifiedAtMs: clock.nowMs() };
  }

  function report(release: ReleaseRow, state: ReleaseState, fraction: number, context: JobContext): void {
    context.progress(fraction);
    updateRelease(db, release.id, { progress: fraction });
    tell(release.id, state, fraction);
  }

  function tell(id: string, state: ReleaseState, progress: number): void {
    activity.publish({ topic: 'release', id, state, progress }, { roles: ['curator'] });
  }

  function onParked({ releaseId }: { releaseId: string }, reason: string): void {
    write(db, (tx) => {
      updateRelease(tx, releaseId, { state: 'failed', failure: toFailure(reason) });
      audit.record(tx, entryOf(releaseId, 'release.failed', { reason }));
    });
    tell(releaseId, 'failed', 0);
  }

  const payload = z.object({ releaseId: idSchema });
  return defineJob({ kind: 'build-release', lane: 'compute', payload, run, onParked });
}

/** Messages of the operating system name paths; those stay in the log. */
function toFailure(reason: string): string {
  const isOfSystem = /^E[A-Z0-9]{2,}: /.test(reason);
  return isOfSystem
    ? 'The server could not read or write a file while it built the archive; its log tells more.'
    : reason;
}

function entryOf(subjectId: string, action: string, detail: Record<string, unknown>) {
  return { personId: null, action, subjectType: 'Release', subjectId, detail };
}
