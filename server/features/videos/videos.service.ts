import { rm, stat } from 'node:fs/promises';
import type { AddedVideo, PatchVideo, Video, Videos } from '../../../shared/contract/videos.ts';
import { mostVideosOfRun } from '../../../shared/contract/videos.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Reader } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, forbidden, notFound, ProblemError } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { RunsService } from '../runs/runs.service.ts';
import { hashFile } from '../uploads/hash-file.ts';
import { plainFileName } from '../uploads/plain-file-name.ts';
import type { UploadFolder } from '../uploads/upload-folder.ts';
import { containerOf } from './film-boxes.ts';
import { isKept, type createBytesTurn } from './kept-bytes.ts';
import { readFilm, writeWithoutSound } from './read-film.ts';
import { toVideo } from './videos.map.ts';
import {
  countVideos,
  insertVideo,
  selectVideo,
  selectVideos,
  updateVideo,
  type VideoRow,
} from './videos.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids' | 'store'> & {
  audit: AuditService;
  runs: RunsService;
  passes: Pick<PassesService, 'isBlindOnRun'>;
  folder: Pick<UploadFolder, 'requireRoom'>;
  inTurn: ReturnType<typeof createBytesTurn>;
};

/** A file to send, and how it is called. */
export interface FilmFile {
  path: string;
  row: VideoRow;
}

export type VideosService = ReturnType<typeof createVideosService>;

/** Films of a run. Who reads the run sees them, unless they mark a recording of it blind. */
export function createVideosService(parts: Parts) {
  const { db, clock, ids, store, audit, runs, passes, folder, inTurn } = parts;

  function list(actor: Actor, runId: string): Videos {
    const run = runs.get(actor, runId);
    if (passes.isBlindOnRun(db, actor, runId)) return { items: [], isWithheld: true, mayAdd: false };
    const items = selectVideos(db, runId).map((row) => toVideo(row, run.editable));
    return { items, isWithheld: false, mayAdd: run.editable };
  }

  /** Before the bytes are read: a run that the person may add to, and room. Answers a path for the bytes. */
  async function admit(actor: Actor, runId: string, announcedBytes: number): Promise<string> {
    requireMayAdd(db, actor, runId);
    // Twice, since a film with sound is written anew without it.
    await folder.requireRoom(2 * announcedBytes);
    return store.tempPath();
  }

  function requireMayAdd(reader: Reader, actor: Actor, runId: string): { labId: string } {
    const run = runs.find(reader, actor, runId);
    if (run === undefined) throw notFound('This run');
    if (!run.editable || passes.isBlindOnRun(reader, actor, runId))
      throw forbidden('Only the contributors of its lab may add films to a run.');
    if (countVideos(reader, runId) >= mostVideosOfRun)
      throw conflict(`This run has ${mostVideosOfRun} films already. Remove one first.`);
    return run;
  }

  /** Checks the film, makes its bytes durable, and only then writes the row. Whoever brought the file removes it. */
  async function bringIn(
    actor: Actor,
    runId: string,
    film: { path: string; fileName: string },
  ): Promise<AddedVideo> {
    const container = await containerOf(film.path);
    const { hasSound, ...facts } = await readFilm(film.path);
    const kept = hasSound ? store.tempPath() : film.path;
    try {
      if (hasSound) await writeWithoutSound(film.path, kept, container);
      const sha256 = await hashFile(kept);
      const { size: sizeBytes } = await stat(kept);
      const told = { runId, container, sha256, sizeBytes, fileName: plainFileName(film.fileName), ...facts };
      const added = await inTurn(async () => {
        await store.putFile(kept, sha256);
        return addRow(actor, told);
      });
      return { ...added, isSoundLeftOut: hasSound };
    } finally {
      await rm(kept, { force: true });
    }
  }

  type Told = Pick<
    VideoRow,
    | 'runId'
    | 'container'
    | 'sha256'
    | 'sizeBytes'
    | 'fileName'
    | 'durationS'
    | 'widthPx'
    | 'heightPx'
    | 'framesPerS'
  >;

  function addRow(actor: Actor, told: Told): Video {
    const nowMs = clock.nowMs();
    const place = { runOffsetNs: null, clockPpm: 0, syncMarks: [] };
    const times = { createdAtMs: nowMs, updatedAtMs: nowMs, deletedAtMs: null };
    const row: VideoRow = { id: ids.next(), ...told, ...place, ...times, createdById: actor.id, revision: 1 };
    write(db, (tx) => {
      const { labId } = requireMayAdd(tx, actor, told.runId);
      insertVideo(tx, row);
      audit.record(tx, entry(actor, 'video.brought-in', { row, labId }));
    });
    return toVideo(row, true);
  }

  function patch(actor: Actor, id: string, input: PatchVideo, revision: number): Video {
    const given = Object.fromEntries(Object.entries(input).filter(([, value]) => value !== undefined));
    return change(actor, id, { action: 'video.placed', revision, isRemoved: false, given });
  }

  function remove(actor: Actor, id: string, revision: number): void {
    change(actor, id, {
      action: 'video.removed',
      revision,
      isRemoved: false,
      given: { deletedAtMs: clock.nowMs() },
    });
  }

  /** As long as the bytes are kept, a removal can be taken back. */
  function restore(actor: Actor, id: string, revision: number): Video {
    return change(actor, id, {
      action: 'video.restored',
      revision,
      isRemoved: true,
      given: { deletedAtMs: null },
    });
  }

  interface Change {
    action: string;
    revision: number;
    /** Which films it is for: those that were removed, or the others. */
    isRemoved: boolean;
    given: Partial<VideoRow>;
  }

  function change(actor: Actor, id: string, { action, revision, isRemoved, given }: Change): Video {
    return write(db, (tx) => {
      const { row, run } = requireVideo(tx, actor, id, isRemoved);
      if (!run.editable) throw forbidden('Only the contributors of its lab may change the films of a run.');
      requireSameRevision(revision, row.revision, toVideo(row, true));
      const next = { ...row, ...given, revision: row.revision + 1, updatedAtMs: clock.nowMs() };
      updateVideo(tx, next);
      audit.record(tx, entry(actor, action, { row: next, labId: run.labId }));
      return toVideo(next, true);
    });
  }

  function film(actor: Actor, id: string): FilmFile {
    const { row } = requireVideo(db, actor, id, false);
    return { path: store.pathOf(row.sha256), row };
  }

  /** Missing, removed, withheld and of a run that may not be seen are one answer. */
  function requireVideo(reader: Reader, actor: Actor, id: string, isRemoved: boolean) {
    const row = selectVideo(reader, id);
    const run = row && runs.find(reader, actor, row.runId);
    if (row === undefined || run === undefined || passes.isBlindOnRun(reader, actor, row.runId))
      throw notFound('This film');
    if ((row.deletedAtMs !== null) !== isRemoved) throw notFound('This film');
    if (row.deletedAtMs !== null && !isKept(row.deletedAtMs, clock.nowMs()))
      throw new ProblemError('gone', 'This film was removed too long ago: its bytes are not kept any more.');
    return { row, run };
  }

  return { list, admit, bringIn, patch, remove, restore, film };
}

function entry(actor: Actor, action: string, { row, labId }: { row: VideoRow; labId: string }) {
  const { id, runId, sha256, sizeBytes, runOffsetNs, clockPpm } = row;
  const detail = { runId, sha256, sizeBytes, runOffsetNs, clockPpm };
  return { personId: actor.id, action, subjectType: 'Video', subjectId: id, labId, detail };
}
