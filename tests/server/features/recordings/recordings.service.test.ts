import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { listRecordingsQuerySchema } from '../../../../shared/contract/recordings.ts';
import { eq } from 'drizzle-orm';
import type { Ultrasound } from '../../../../shared/contract/measurement.ts';
import { measurements } from '../../../../server/db/schema/measurements.ts';
import { updateRecording } from '../../../../server/features/recordings/recordings.queries.ts';
import { detectedCandidate, replaceCandidates } from '../../../support/server/seed-candidates.ts';
import {
  seedMeasured,
  seedPass,
  seedRecording,
  setSharing,
} from '../../../support/server/seed-recordings.ts';
import type { PersonName } from '../../../support/server/seed-actors.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const get = (name: PersonName, id: string) => app.deps.services.recordings.get(app.actor(name), id);
const list = (name: PersonName, facts: object = {}) =>
  app.deps.services.recordings.list(app.actor(name), listRecordingsQuerySchema.parse(facts));

/** As if the detector had heard bursts in the first tenth of a second. */
function tellActivity(recordingId: string, ultrasonic: Partial<Ultrasound>): void {
  const isOfIt = eq(measurements.recordingId, recordingId);
  const { summary } = app.deps.db.select().from(measurements).where(isOfIt).get()!;
  const span = { startSample: 0, endSample: 9600, candidates: 9, ratePerS: 90, expectedByChance: 0.1 };
  const told = { ...summary, activeSpans: [span], ultrasonic: { ...summary.ultrasonic, ...ultrasonic } };
  app.deps.db.update(measurements).set({ summary: told }).where(isOfIt).run();
}

describe('the list of recordings', () => {
  test('neither shows nor counts what another lab has not shared', async () => {
    const hidden = await seedRecording(app, { side: 'other', fileName: 'secret-alloy.wav' });
    for (const sharing of ['pending', 'held', 'lab', 'embargoed', 'refused', 'withdrawn'] as const) {
      setSharing(app, hidden, sharing);
      expect(list('contributor', { q: 'secret' })).toMatchObject({ items: [], total: { count: 0 } });
      expect(list('curator', { q: 'secret' }).total.count).toBe(0);
    }
    setSharing(app, hidden, 'shared');
    expect(list('contributor', { q: 'secret' }).total.count).toBe(1);
    expect(list('administrator', { q: 'secret' }).total.count).toBe(0);
    expect(list('labeler', { q: 'secret' }).total.count).toBe(0);
  });

  test('narrows by state, lab and verdict, and pages without losing or repeating one', async () => {
    const ids = [];
    for (let n = 0; n < 5; n++) ids.push(await seedRecording(app, { fileName: `paged-${n}.wav` }));
    updateRecording(app.deps.db, ids[0]!, { processing: 'failed' });
    expect(list('contributor', { q: 'paged', processing: 'failed' }).items.map(({ id }) => id)).toEqual([
      ids[0],
    ]);
    expect(list('contributor', { q: 'paged', labId: app.otherLabId }).total.count).toBe(0);
    expect(list('contributor', { q: 'paged', ultrasonicVerdict: 'found' }).total.count).toBe(0);
    const paged = [];
    for (let cursor: string | null | undefined; cursor !== null;) {
      const page = list('contributor', { q: 'paged', limit: 2, cursor });
      paged.push(...page.items.map(({ id }) => id));
      cursor = page.nextCursor;
    }
    expect(paged).toEqual(ids.reverse());
  });
});

describe('what one recording tells', () => {
  test('the owning lab its findings, nobody else any', async () => {
    const id = await seedMeasured(app, { sensitivity: ['voices'], sharing: 'shared' });
    expect(get('contributor', id).findings).toHaveLength(1);
    expect(get('reviewer', id).findings).toHaveLength(1);
    expect(get('otherContributor', id).findings).toEqual([]);
    expect(get('curator', id).findings).toEqual([]);
  });

  test('a reviewer may decide what is held and was brought in by somebody else', async () => {
    const id = await seedMeasured(app, { sharing: 'held' });
    expect(get('reviewer', id).may.decide).toBe(true);
    expect(get('contributor', id).may.decide).toBe(false);
    updateRecording(app.deps.db, id, { uploadedById: app.personIds.reviewer });
    expect(get('reviewer', id).may.decide).toBe(false);
  });

  test('a curator may assign what is shared and measured', async () => {
    const measured = await seedMeasured(app, { sharing: 'shared' });
    const queued = await seedRecording(app, { sharing: 'shared' });
    expect([get('curator', measured).may.assign, get('curator', queued).may.assign]).toEqual([true, false]);
    expect(get('contributor', measured).may.assign).toBe(false);
  });

  test('nothing of a measurement before it is finished', async () => {
    const id = await seedRecording(app);
    expect(get('contributor', id)).toMatchObject({
      measurement: null,
      ultrasonicVerdict: null,
      candidateCount: null,
    });
  });
});

describe('whoever works blind', () => {
  test('learns neither candidates, counts nor rates, until the pass is finished', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    replaceCandidates(app.deps, id, [detectedCandidate()]);
    seedPass(app, id, { blind: true });
    const blind = get('labeler', id);
    expect(blind).toMatchObject({
      blind: true,
      candidateCount: null,
      eventCount: null,
      may: { mark: true, assign: false },
    });
    expect(blind.measurement?.ultrasonic).toMatchObject({
      ...{ spanCount: 0, spans: [], burstEnergyShare: null },
      candidates: { total: 0, below: 0, across: 0, above: 0, expectedByChance: 0 },
    });
    expect(blind.measurement?.course.candidates).toEqual([]);
    expect(blind.measurement?.course.ultrasonicDb.every((level) => level === null)).toBe(true);
    expect(blind.measurement?.course.levelDb.some((level) => level !== null)).toBe(true);
    const listed = { candidateCount: null, ultrasonicVerdict: null };
    expect(list('labeler').items.find((item) => item.id === id)).toMatchObject(listed);
    expect(get('contributor', id)).toMatchObject({ blind: false, candidateCount: 1, eventCount: 0 });
  });

  test('learns neither when bursts are frequent, nor whether there is ultrasound at all', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    seedPass(app, id, { blind: true });
    tellActivity(id, { verdict: 'found', energyShare: 0.4 });
    const { measurement } = get('labeler', id);
    expect(measurement).toMatchObject({
      activeSpans: [],
      ultrasonic: { verdict: 'withheld', energyShare: null },
    });
    expect(get('contributor', id).measurement).toMatchObject({
      activeSpans: [{ candidates: 9 }],
      ultrasonic: { verdict: 'found' },
    });
    const idsOf = (who: PersonName) => list(who, { ultrasonicVerdict: 'found' }).items.map((item) => item.id);
    expect(idsOf('labeler')).not.toContain(id);
    expect(idsOf('contributor')).toContain(id);
  });

  test('is told that ultrasound cannot be observed, which the file alone decides', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    seedPass(app, id, { blind: true });
    tellActivity(id, { verdict: 'not-observable' });
    expect(get('labeler', id).measurement?.ultrasonic.verdict).toBe('not-observable');
    expect(list('labeler', { ultrasonicVerdict: 'not-observable' }).items.map((item) => item.id)).toContain(
      id,
    );
  });

  test('sees everything after finishing, and nothing once the pass is cancelled', async () => {
    const finished = await seedMeasured(app, { sharing: 'shared' });
    replaceCandidates(app.deps, finished, [detectedCandidate(), detectedCandidate()]);
    seedPass(app, finished, { state: 'finished' });
    expect(get('labeler', finished)).toMatchObject({ blind: false, candidateCount: 2, may: { mark: false } });
    const cancelled = await seedMeasured(app, { sharing: 'shared' });
    seedPass(app, cancelled, { state: 'cancelled' });
    expect(() => get('labeler', cancelled)).toThrow('not-found');
  });

  test('an open pass that is not blind hides nothing', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    seedPass(app, id, { blind: false });
    expect(get('labeler', id)).toMatchObject({ blind: false, eventCount: 0, may: { mark: true } });
  });

  test('loses the recording when it is held again', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    seedPass(app, id);
    expect(get('labeler', id).id).toBe(id);
    setSharing(app, id, 'held');
    expect(() => get('labeler', id)).toThrow('not-found');
  });
});
