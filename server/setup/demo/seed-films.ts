import { copyFile } from 'node:fs/promises';
import path from 'node:path';
import { syncFromMarks } from '../../../shared/domain/film-clock.ts';
import type { Deps } from '../../deps.ts';
import type { DemoActors } from './seed-people.ts';
import type { DemoRecordingIds } from './seed-recordings.ts';

const filmed = 'stage-dendritic-a';
const fileName = 'coldstage_run-17_camera.webm';
/** The flash in the corner of the film, on both clocks. */
const flash = { videoS: 3.5, runTimeNs: 2_000_000_000 };

/** One small film of a droplet, in step by its flash. */
export async function seedFilms(
  deps: Deps,
  people: DemoActors,
  recordingIds: DemoRecordingIds,
): Promise<void> {
  const { services, store, config } = deps;
  const contributor = people.actor('contributor');
  const { runId } = services.recordings.get(contributor, recordingIds.get(filmed) ?? '');
  const incoming = store.tempPath();
  await copyFile(path.join(config.projectRoot, 'fixtures', 'video', 'droplet.webm'), incoming);
  const video = await services.videos.bringIn(contributor, runId, { path: incoming, fileName });
  const sync = syncFromMarks([flash], video.framesPerS);
  const runOffsetNs = sync?.runOffsetNs ?? null;
  services.videos.patch(contributor, video.id, { syncMarks: [flash], runOffsetNs }, video.revision);
}
