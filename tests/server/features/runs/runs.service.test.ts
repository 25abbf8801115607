import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { listRunsQuerySchema } from '../../../../shared/contract/runs.ts';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import {
  runInput,
  seedPass,
  seedRecording,
  seedRun,
  setSharing,
} from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const query = (facts: object = {}) => listRunsQuerySchema.parse(facts);
const runsOf = (name: 'contributor' | 'otherContributor' | 'labeler' | 'administrator', facts: object = {}) =>
  app.deps.services.runs.list(app.actor(name), query(facts));

describe('the list of runs', () => {
  test('neither shows nor counts what another lab has not shared', () => {
    seedRun(app, 'other', 'Hidden casting');
    const page = runsOf('contributor', { q: 'Hidden' });
    expect(page).toEqual({ items: [], nextCursor: null, total: { count: 0, capped: false } });
    expect(runsOf('otherContributor', { q: 'Hidden' }).total.count).toBe(1);
  });

  test('shows a run of another lab from its first shared recording on, and counts only the shared ones', async () => {
    const sharedId = await seedRecording(app, { side: 'other', sharing: 'shared' });
    const { runId } = app.deps.services.recordings.get(app.actor('otherContributor'), sharedId);
    expect(app.deps.services.runs.get(app.actor('contributor'), runId)).toMatchObject({
      recordingCount: 1,
      editable: false,
    });
    setSharing(app, sharedId, 'held');
    expect(() => app.deps.services.runs.get(app.actor('contributor'), runId)).toThrow('not-found');
    expect(app.deps.services.runs.get(app.actor('otherContributor'), runId).recordingCount).toBe(1);
  });

  test('shows a labeler the runs of assigned recordings only', async () => {
    const given = await seedRecording(app, { sharing: 'shared' });
    const cancelled = await seedRecording(app, { sharing: 'shared' });
    seedPass(app, given);
    seedPass(app, cancelled, { state: 'cancelled' });
    const { runId } = app.deps.services.recordings.get(app.actor('contributor'), given);
    expect(runsOf('labeler').items.map((run) => run.id)).toEqual([runId]);
    expect(runsOf('administrator').total.count).toBe(0);
  });

  test('goes through all pages without losing or repeating one, in every order', () => {
    for (let n = 0; n < 7; n++) seedRun(app, 'own', `Paged ${n % 3}`);
    for (const sort of ['newest', 'oldest', 'title'] as const) {
      const all = runsOf('contributor', { q: 'Paged', sort, limit: 200 }).items.map((run) => run.id);
      const paged: string[] = [];
      for (let cursor: string | null | undefined; cursor !== null;) {
        const page = runsOf('contributor', { q: 'Paged', sort, limit: 2, cursor });
        paged.push(...page.items.map((run) => run.id));
        expect(page.total.count).toBe(7);
        cursor = page.nextCursor;
      }
      expect(paged).toEqual(all);
      expect(new Set(paged).size).toBe(7);
    }
  });

  test('takes % and _ as they are written', () => {
    seedRun(app, 'own', '50 % sugar_water');
    expect(runsOf('contributor', { q: '50 %' }).total.count).toBe(1);
    expect(runsOf('contributor', { q: 'r_w' }).total.count).toBe(1);
    expect(runsOf('contributor', { q: '_0 %' }).total.count).toBe(0);
  });

  test('refuses a cursor that no list has given out', () => {
    expect(() => runsOf('contributor', { cursor: 'bm9uc2Vuc2U' })).toThrow('cursor');
  });
});

describe('changing a run', () => {
  test('raises the revision, keeps the lab, and leaves an audit row', () => {
    const { runs } = app.deps.services;
    const run = seedRun(app);
    const changed = runs.update(app.actor('contributor'), run.id, 1, runInput(app.ownLabId, 'Renamed'));
    expect(changed).toMatchObject({ title: 'Renamed', revision: 2 });
    const actions = app.deps.db
      .select()
      .from(auditLog)
      .all()
      .filter((row) => row.subjectId === run.id);
    expect(actions.map((row) => row.action)).toEqual(['run.created', 'run.updated']);
    expect(() => runs.update(app.actor('contributor'), run.id, 2, runInput(app.otherLabId))).toThrow(
      'Lab cannot change',
    );
  });

  test('is refused as stale with the present state where somebody was faster', () => {
    const { runs } = app.deps.services;
    const run = seedRun(app);
    runs.update(app.actor('contributor'), run.id, 1, runInput(app.ownLabId, 'First'));
    expect(() => runs.update(app.actor('contributor'), run.id, 1, runInput(app.ownLabId, 'Second'))).toThrow(
      expect.objectContaining({ code: 'stale', current: expect.objectContaining({ title: 'First' }) }),
    );
  });
});
