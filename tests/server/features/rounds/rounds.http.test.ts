import { eq } from 'drizzle-orm';
import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { passes } from '../../../../server/db/schema/events.ts';
import type { RoundPage } from '../../../../shared/contract/rounds.ts';
import { detectedCandidate, replaceCandidates } from '../../../support/server/seed-candidates.ts';
import type { Assigned } from '../../../support/server/seed-marking.ts';
import { roundCandidates, seedRound } from '../../../support/server/seed-rounds.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let assigned: Assigned;
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());
beforeEach(async () => {
  assigned = await seedRound(app);
});

const labeler = () => app.as('labeler');
const round = (query = '') => labeler().get(`/api/passes/${assigned.passId}/round?${query}`);

async function page(query = ''): Promise<RoundPage> {
  const { status, body } = await round(query);
  expect(status, JSON.stringify(body)).toBe(200);
  return body as RoundPage;
}

const noEvent = (facts: object = {}) => ({
  id: uuidV7(),
  verdict: 'no-event',
  passId: assigned.passId,
  ...facts,
});
const crack = (facts: object = {}) => ({
  ...noEvent({ verdict: 'event' }),
  mark: { id: uuidV7(), classKey: 'crack', confidence: 'sure' },
  ...facts,
});
const answer = (candidateId: string, body: object) =>
  labeler().post(`/api/candidates/${candidateId}/verdict`).send(body);
const candidateAt = async (rank: number) => (await page(`rank=${rank}&limit=1`)).items[0]!.candidate.id;
const marks = async () =>
  (await labeler().get(`/api/recordings/${assigned.recordingId}/events`)).body.items as { id: string }[];
const setPass = (values: Partial<typeof passes.$inferInsert>) =>
  app.deps.db.update(passes).set(values).where(eq(passes.id, assigned.passId)).run();

describe('the candidates of a round', () => {
  test('come by time, with what they are, page after page', async () => {
    const first = await page('limit=4');
    expect(first).toMatchObject({
      order: 'time',
      firstRank: 0,
      firstUnanswered: 0,
      isReplaced: false,
      groups: [],
    });
    expect(first.progress).toEqual({ candidates: 10, events: 0, noEvents: 0, undecided: 0 });
    const rest = await page('rank=4&limit=200');
    const onsets = [...first.items, ...rest.items].map(({ candidate }) => candidate.onsetSample);
    expect(onsets).toEqual(roundCandidates().map(({ onsetSample }) => onsetSample));
    expect(rest.items.map(({ rank }) => rank)).toEqual([4, 5, 6, 7, 8, 9]);
  });

  test('come by strength, the strongest first', async () => {
    const { items } = await page('order=strength');
    const snr = items.map(({ candidate }) => candidate.snrDb);
    expect(snr).toEqual([19, 18, 17, 16, 15, 14, 13, 12, 11, 10]);
  });

  test('come by uncertainty, the weakest first and every fourth drawn', async () => {
    const { items } = await page('order=uncertainty');
    expect(items.map(({ isDrawn }) => isDrawn).slice(0, 8)).toEqual([
      ...[false, false, false, true],
      ...[false, false, false, true],
    ]);
    const chosen = items.filter(({ isDrawn }) => !isDrawn).map(({ candidate }) => candidate.snrDb!);
    expect(chosen).toEqual([...chosen].sort((a, b) => a - b));
    expect(new Set(items.map(({ candidate }) => candidate.id)).size).toBe(10);
  });

  test('come in groups that look alike, large ones first', async () => {
    const low = Array.from({ length: 6 }, (_value, n) =>
      detectedCandidate({
        onsetSample: 100 + n,
        peakFrequencyHz: 4_000,
        centroidHz: 4_000,
        ultrasonicShare: 0,
      }),
    );
    const high = Array.from({ length: 12 }, (_value, n) => detectedCandidate({ onsetSample: 900 + n }));
    assigned = await seedRound(app, [...low, ...high], 'likeness');
    const { order, items, groups } = await page();
    expect(order).toBe('likeness');
    expect(groups).toMatchObject([
      { number: 1, groups: 2, size: 12, firstRank: 0, spotChecks: 2 },
      { number: 2, groups: 2, size: 6, firstRank: 12, spotChecks: 2 },
    ]);
    expect(items.map(({ candidate }) => candidate.peakFrequencyHz)).toEqual([
      ...new Array(12).fill(30_000),
      ...new Array(6).fill(4_000),
    ]);
    expect(items[13]!.groupKey).toBe(groups[1]!.key);
  });

  test('are grouped in a thread of its own where they are many, the same each time', async () => {
    assigned = await seedRound(app, roundCandidates(300), 'likeness');
    const first = await page('rank=0&limit=200');
    const again = await page('rank=0&limit=200');
    expect(first.items).toHaveLength(200);
    expect(again).toEqual(first);
  });

  test('begin with the first that is not answered', async () => {
    await answer(await candidateAt(0), noEvent()).expect(200);
    await answer(await candidateAt(1), noEvent({ verdict: 'undecided' })).expect(200);
    await answer(await candidateAt(5), crack()).expect(200);
    const { firstRank, firstUnanswered, progress } = await page('limit=2');
    expect([firstRank, firstUnanswered]).toEqual([2, 2]);
    expect(progress).toEqual({ candidates: 10, events: 1, noEvents: 1, undecided: 1 });
  });

  test('are none beyond the last one, when all are answered', async () => {
    for (const { candidate } of (await page()).items) await answer(candidate.id, noEvent()).expect(200);
    expect(await page()).toMatchObject({ firstUnanswered: null, firstRank: 10, items: [] });
  });
});

describe('an answer', () => {
  test('"no event" is stored, and found again', async () => {
    const id = await candidateAt(3);
    const body = noEvent({ tookMs: 1_240 });
    const stored = await answer(id, body).expect(200);
    expect(stored.body).toMatchObject({ candidateId: id, event: null });
    expect(stored.body.answer).toMatchObject({
      id: body.id,
      verdict: 'no-event',
      tookMs: 1_240,
      revision: 1,
    });
    expect((await page('rank=3&limit=1')).items[0]!.answer).toEqual(stored.body.answer);
    expect(await marks()).toEqual([]);
  });

  test('of an event sets the mark of the candidate with it, measured on the untouched samples', async () => {
    const id = await candidateAt(2);
    const body = crack();
    const { body: stored } = await answer(id, body).expect(200);
    expect(stored.event).toMatchObject({
      id: body.mark.id,
      candidateId: id,
      origin: 'candidate',
      classKey: 'crack',
      startSample: 10_200,
      endSample: 10_300,
      uncertaintySamples: 0.48,
      parameters: { onsetSample: 10_200 },
    });
    expect(stored.answer).toMatchObject({ eventId: body.mark.id, classKey: 'crack', confidence: 'sure' });
    expect(await marks()).toHaveLength(1);
  });

  test('is stored once, however often it is sent', async () => {
    const id = await candidateAt(2);
    const body = crack();
    const answers = await Promise.all([1, 2, 3].map(() => answer(id, body)));
    expect(answers.map(({ status }) => status)).toEqual([200, 200, 200]);
    expect(answers[2]!.body).toEqual(answers[0]!.body);
    expect(await marks()).toHaveLength(1);
    expect((await page()).progress.events).toBe(1);
  });

  test('can be changed: the mark gets the other class, and goes where there is no event', async () => {
    const id = await candidateAt(2);
    const body = crack();
    await answer(id, body).expect(200);
    const twin = { ...body, revision: 1, mark: { ...body.mark, classKey: 'twin', confidence: 'probable' } };
    const changed = await answer(id, twin).expect(200);
    expect(changed.body.event).toMatchObject({ id: body.mark.id, classKey: 'twin', revision: 2 });
    await answer(id, { ...body, revision: 2, verdict: 'no-event', mark: null }).expect(200);
    expect(await marks()).toEqual([]);
    const back = crack({ id: body.id, revision: 3 });
    await answer(id, back).expect(200);
    expect(await marks()).toMatchObject([{ id: back.mark.id }]);
  });

  test('can be taken back, with its mark; safe to repeat', async () => {
    const id = await candidateAt(2);
    const body = crack();
    await answer(id, body).expect(200);
    const back = { ...body, revision: 1, verdict: null, mark: null };
    for (const _time of [1, 2]) {
      const answered = await answer(id, back).expect(200);
      expect(answered.body).toEqual({ candidateId: id, answer: null, event: null });
    }
    expect(await marks()).toEqual([]);
    expect((await page()).progress).toMatchObject({ events: 0 });
  });

  test('that is taken back late does not touch the next one', async () => {
    const id = await candidateAt(2);
    const first = noEvent();
    await answer(id, first).expect(200);
    await answer(id, { ...first, revision: 1, verdict: null }).expect(200);
    await answer(id, noEvent({ verdict: 'undecided' })).expect(200);
    await answer(id, { ...first, revision: 1, verdict: null }).expect(412);
    expect((await page()).progress.undecided).toBe(1);
  });

  test('from another window is told and not overwritten', async () => {
    const id = await candidateAt(2);
    await answer(id, crack()).expect(200);
    const late = await answer(id, noEvent());
    expect(late.status).toBe(412);
    expect(late.body.detail).toContain('another window');
    expect(late.body.current.answer).toMatchObject({ verdict: 'event', classKey: 'crack' });
  });

  test('whose mark was deleted by hand counts no more, and can be given again', async () => {
    const id = await candidateAt(0);
    const body = crack();
    await answer(id, body).expect(200);
    await labeler().delete(`/api/events/${body.mark.id}`).set('If-Match', '"1"').expect(204);
    expect(await page('limit=1')).toMatchObject({ firstUnanswered: 0, progress: { events: 0 } });
    expect((await page('limit=1')).items[0]!.answer).toBeNull();
    const again = await answer(id, { ...crack(), id: body.id, revision: 1 }).expect(200);
    expect(again.body.answer).toMatchObject({ verdict: 'event', revision: 2 });
  });

  test('leaves a trace for every change', async () => {
    const id = await candidateAt(4);
    const body = noEvent();
    await answer(id, body);
    await answer(id, { ...body, verdict: 'undecided', revision: 1 });
    await answer(id, { ...body, verdict: null, revision: 2 });
    const rows = await app.as('administrator').get('/api/audit?limit=3');
    expect(rows.body.items.map((row: { action: string }) => row.action)).toEqual([
      'candidate.answer-taken-back',
      'candidate.answer-changed',
      'candidate.answered',
    ]);
    expect(rows.body.items[2]).toMatchObject({ subjectId: id, detail: { verdict: 'no-event', revision: 1 } });
  });
});

describe('look-alikes', () => {
  const many = (answers: object[]) =>
    labeler().post(`/api/passes/${assigned.passId}/verdicts`).send({ answers });
  async function answersFor(ranks: number[], facts: (candidateId: string) => object) {
    return Promise.all(
      ranks.map(async (rank) => {
        const candidateId = await candidateAt(rank);
        const { passId: _passId, ...body } = {
          ...noEvent({ groupKey: 'look-alikes-1.1' }),
          ...facts(candidateId),
        };
        return { ...body, candidateId };
      }),
    );
  }
  const asCracks = () => ({ verdict: 'event', mark: crack().mark });

  test('are answered at once, and all taken back at once', async () => {
    const answers = await answersFor([1, 2, 3, 4], asCracks);
    const stored = await many(answers).expect(200);
    expect(stored.body.items).toHaveLength(4);
    expect(await marks()).toHaveLength(4);
    await many(answers).expect(200);
    expect(await marks()).toHaveLength(4);
    await many(answers.map((one) => ({ ...one, verdict: null, mark: null, revision: 1 }))).expect(200);
    expect(await marks()).toEqual([]);
    expect((await page()).firstUnanswered).toBe(0);
  });

  test('are all stored, or none', async () => {
    await answer(await candidateAt(3), noEvent()).expect(200);
    const refused = await many(await answersFor([1, 2, 3], asCracks));
    expect(refused.status).toBe(412);
    expect(await marks()).toEqual([]);
    expect((await page()).progress).toMatchObject({ events: 0, noEvents: 1 });
  });

  test('are refused where one is named twice, none is named, or they are too many', async () => {
    const [one] = await answersFor([1], () => ({}));
    await many([one!, { ...one!, id: uuidV7() }]).expect(422);
    await many([]).expect(422);
    const tooMany = Array.from({ length: 201 }, () => ({ ...one!, id: uuidV7(), candidateId: uuidV7() }));
    await many(tooMany).expect(422);
  });
});

describe('a round is refused', () => {
  test.each([
    [{ blind: true }, 409, 'blind'],
    [{ kind: 'whole' as const }, 409, 'rounds'],
    [{ state: 'finished' as const }, 409, 'finished'],
    [{ state: 'cancelled' as const }, 404, 'does not exist'],
  ])('in a pass with %j', async (values, status, words) => {
    const id = await candidateAt(0);
    setPass(values);
    for (const refused of [await round(), await answer(id, noEvent())]) {
      expect(refused.status).toBe(status);
      expect(refused.body.detail).toContain(words);
    }
  });

  test('to whoever marks the recording blind in another pass', async () => {
    const id = await candidateAt(0);
    const other = { ...app.deps.db.select().from(passes).where(eq(passes.id, assigned.passId)).get()! };
    app.deps.db
      .insert(passes)
      .values({ ...other, id: uuidV7(), kind: 'whole', blind: true })
      .run();
    await round().expect(404);
    await answer(id, noEvent()).expect(404);
  });

  test('for a candidate of another recording', async () => {
    const first = assigned;
    const foreign = await candidateAt(0);
    assigned = await seedRound(app);
    expect(assigned.passId).not.toBe(first.passId);
    await answer(foreign, noEvent()).expect(404);
    await answer(uuidV7(), noEvent()).expect(404);
  });

  test.each([
    [{ verdict: 'event' }, 'mark'],
    [{ mark: { id: uuidV7(), classKey: 'crack', confidence: 'sure' } }, 'mark'],
    [{ verdict: 'maybe' }, 'verdict'],
    [{ tookMs: -1 }, 'tookMs'],
    [{ verdict: 'event', mark: { id: uuidV7(), classKey: 'thunder', confidence: 'sure' } }, 'classKey'],
  ])('where the answer does not fit: %j', async (facts, path) => {
    const refused = await answer(await candidateAt(0), noEvent(facts));
    expect(refused.status).toBe(422);
    expect(refused.body.fields).toEqual([expect.objectContaining({ path })]);
  });
});

describe('when the detector has run again', () => {
  test('a round that has begun goes on with its candidates and says so', async () => {
    const old = await candidateAt(0);
    await answer(old, noEvent()).expect(200);
    replaceCandidates(app.deps, assigned.recordingId, roundCandidates(5));
    expect(await page()).toMatchObject({
      isReplaced: true,
      firstUnanswered: 1,
      progress: { candidates: 10 },
    });
    await answer(await candidateAt(1), noEvent()).expect(200);
    const list = await app.as('curator').get(`/api/recordings/${assigned.recordingId}/candidates`);
    const refused = await answer(list.body.items[0].id, noEvent());
    expect(refused.status).toBe(409);
    expect(refused.body.detail).toContain('run again');
  });

  test('a round that has not begun takes the new candidates', async () => {
    replaceCandidates(app.deps, assigned.recordingId, roundCandidates(5));
    expect(await page()).toMatchObject({ isReplaced: false, progress: { candidates: 5 } });
  });
});
