import { eq } from 'drizzle-orm';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { recordings } from '../../../../server/db/schema/recordings.ts';
import { barsBytes } from '../../../support/film-fixtures.ts';
import { seedRunOfRecording } from '../../../support/server/seed-phases.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

const day = 24 * 60 * 60_000;
let app: TestApp;
let runId: string;
let recordingId: string;
beforeEach(async () => {
  app = createTestApp();
  ({ runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' }));
});
afterEach(() => app.close());

interface Film {
  id: string;
  sha256: string;
}

async function bring(name: 'bars.webm' | 'bars.mp4'): Promise<Film> {
  const answer = await app
    .as('contributor')
    .post(`/api/runs/${runId}/videos`)
    .query({ fileName: name, peopleAgreed: 'true' })
    .set('Content-Type', 'application/octet-stream')
    .send(Buffer.from(barsBytes(name)))
    .expect(201);
  return answer.body as Film;
}

// Sessions end sooner than removals: the services are asked themselves.
const remove = ({ id }: Film) => app.deps.services.videos.remove(app.actor('contributor'), id, 1);
const restore = ({ id }: Film) => app.deps.services.videos.restore(app.actor('contributor'), id, 2);
const sweep = () => app.deps.services.videoSweep.sweep();
const isStored = ({ sha256 }: Film) => app.deps.store.has(sha256);

describe('the bytes of a removed film', () => {
  test('are kept for thirty days, in which the removal can be taken back, and then go', async () => {
    const [gone, kept] = [await bring('bars.webm'), await bring('bars.mp4')];
    remove(gone);
    app.clock.advance(30 * day - 1);
    expect(await sweep()).toBe(0);
    expect(await isStored(gone)).toBe(true);
    app.clock.advance(1);
    expect(() => restore(gone)).toThrow('removed too long ago');
    expect(await sweep()).toBe(1);
    expect([await isStored(gone), await isStored(kept)]).toEqual([false, true]);
    expect(() => restore(gone)).toThrow('does not exist');
    expect(await sweep()).toBe(0);
    const log = app.deps.db.select().from(auditLog).where(eq(auditLog.subjectId, gone.id)).all();
    expect(log.map(({ action, personId }) => [action, personId]).at(-1)).toEqual(['video.swept', null]);
  });

  test('stay where the removal was taken back in time', async () => {
    const film = await bring('bars.webm');
    remove(film);
    app.clock.advance(29 * day);
    restore(film);
    app.clock.advance(30 * day);
    expect(await sweep()).toBe(0);
    expect(await isStored(film)).toBe(true);
  });

  test('stay where the same film was brought in again, or the same bytes as a recording', async () => {
    const first = await bring('bars.webm');
    remove(first);
    const again = await bring('bars.webm');
    app.clock.advance(31 * day);
    expect(await sweep()).toBe(1);
    expect(await isStored(again)).toBe(true);
    remove(again);
    app.deps.db.update(recordings).set({ sha256: again.sha256 }).where(eq(recordings.id, recordingId)).run();
    app.clock.advance(31 * day);
    expect(await sweep()).toBe(1);
    expect(await isStored(again)).toBe(true);
  });
});
