import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { seedPass, seedRecording, seedRun } from '../../../support/server/seed-recordings.ts';
import { plainMapping, seedTrace, traceInput } from '../../../support/server/seed-traces.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { storedState } from '../../../support/server/stored-state.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const logger = readFileSync('fixtures/traces/logger.csv');
const loggerMapping = { ...plainMapping, separator: 'semicolon', decimal: 'comma' };

interface Sent {
  runId?: string;
  csv?: string | Buffer;
  told?: object | string | null;
  part?: string;
}

function send({ runId = seedRun(app).id, csv = '0,1\n1,2\n', told = traceInput(), part = 'file' }: Sent) {
  const request = app.as('contributor').post(`/api/runs/${runId}/traces`);
  if (told !== null) void request.field('trace', typeof told === 'string' ? told : JSON.stringify(told));
  return request.attach(part, Buffer.from(csv), { filename: 'stage 17.csv', contentType: 'text/csv' });
}

describe('a trace that is added', () => {
  test('is answered with its figures, kept as it came, and audited', async () => {
    const run = seedRun(app);
    const told = traceInput({ mapping: loggerMapping, runOffsetNs: -60e9 });
    const answer = await send({ runId: run.id, csv: logger, told });
    expect(answer.status, answer.text).toBe(201);
    expect(answer.headers['etag']).toBe('"1"');
    expect(answer.body).toMatchObject({
      name: 'Thermocouple',
      quantity: 'temperature',
      unit: '°C',
      fileName: 'stage 17.csv',
      points: 501,
      durationS: 100,
      runOffsetNs: -60e9,
      clockPpm: 0,
      editable: true,
      revision: 1,
      notes: [],
      sha256: createHash('sha256').update(logger).digest('hex'),
    });
    const file = await app.as('contributor').get(`/api/traces/${answer.body.id}/file`).buffer(true);
    expect(file.headers['content-disposition']).toContain('attachment; filename="stage 17.csv"');
    expect(file.text).toBe(logger.toString('utf8'));
    expect(readFileSync('fixtures/traces/README.md', 'utf8')).toContain(answer.body.sha256);
    const rows = app.deps.db.select().from(auditLog).all();
    expect(rows.filter((row) => row.subjectId === answer.body.id).map((row) => row.action)).toEqual([
      'trace.added',
    ]);
  });

  test('tells what was noticed while it was read', async () => {
    const answer = await send({ csv: '0,1\n1,OL\n2,3\n' });
    expect(answer.body).toMatchObject({ points: 2, notes: [expect.stringContaining('left out')] });
  });

  test('has the unit of a temperature in one of three spellings', async () => {
    const answer = await send({ told: traceInput({ mapping: { ...plainMapping, unit: 'deg C' } }) });
    expect(answer.body).toMatchObject({ unit: '°C', mapping: { unit: '°C' } });
  });
});

describe('a trace that is refused', () => {
  test.each([
    ['a table without numbers', { csv: 'a,b\nc,d\n' }, 'file-refused', 'No line of this table has a number'],
    [
      'decimal commas',
      { csv: '0;5,1\n1;5,2\n', told: traceInput({ mapping: { ...plainMapping, separator: 'semicolon' } }) },
      'file-refused',
      'decimal commas',
    ],
    ['separators that change', { csv: '0,1\n1,2\n2;3\n' }, 'file-refused', 'Line 3 has 1 cell'],
    [
      'time that goes back',
      { csv: '0,1\n5,2\n4,3\n' },
      'file-refused',
      'Line 3 goes back in time, from 5 s to 4 s',
    ],
    ['bytes that are no text', { csv: Buffer.from([0, 1, 2, 0]) }, 'file-refused', 'no table in plain text'],
    [
      'a temperature in volts',
      { told: traceInput({ mapping: { ...plainMapping, unit: 'V' } }) },
      'invalid-input',
      'mapping.unit',
    ],
    [
      'one column for both',
      { told: traceInput({ mapping: { ...plainMapping, valueColumn: 0 } }) },
      'invalid-input',
      'mapping.valueColumn',
    ],
    ['no name', { told: traceInput({ name: ' ' }) }, 'invalid-input', 'name'],
    ['nothing told', { told: null }, 'invalid-input', 'Trace is needed'],
    ['text that is no JSON', { told: '{' }, 'invalid-input', 'Trace is not JSON'],
    ['a file in another part', { part: 'table' }, 'invalid-input', 'the file belongs in the part file'],
  ])('%s', async (_, sent, code, words) => {
    const before = storedState(app);
    const answer = await send(sent);
    expect(answer.body.code, answer.text).toBe(code);
    expect(answer.text).toContain(words);
    expect(storedState(app)).toEqual(before);
  });

  test('more than 50 MB, before and while it arrives', async () => {
    const { traces } = app.deps.services;
    const { id } = seedRun(app);
    await expect(traces.admit(app.actor('contributor'), id, 60e6)).rejects.toMatchObject({
      code: 'too-large',
    });
    const before = storedState(app);
    const answer = await send({ runId: id, csv: Buffer.alloc(50_000_001, '1') });
    expect(answer.body).toMatchObject({ status: 413, detail: 'The file is larger than 50 MB.' });
    expect(storedState(app)).toEqual(before);
  });

  test('by somebody in a blind pass on that run, with the reason', async () => {
    const recordingId = await seedRecording(app, { sharing: 'shared' });
    const { runId } = app.deps.services.recordings.get(app.actor('contributor'), recordingId);
    const passId = seedPass(app, recordingId);
    app.deps.db.$client
      .prepare('update passes set labeler_id = ? where id = ?')
      .run(app.personIds.contributor, passId);
    const answer = await send({ runId });
    expect(answer.body).toMatchObject({
      code: 'conflict',
      detail: expect.stringContaining('open blind pass'),
    });
  });
});

describe('a change of a trace', () => {
  test('needs the revision it was made from', async () => {
    const trace = await seedTrace(app, seedRun(app).id);
    const patch = () => app.as('contributor').patch(`/api/traces/${trace.id}`).send({ runOffsetNs: 2.5e9 });
    expect((await patch()).status).toBe(428);
    expect((await patch().set('If-Match', '"1"')).body).toMatchObject({ runOffsetNs: 2.5e9, revision: 2 });
    const stale = await patch().set('If-Match', '"1"');
    expect([stale.status, stale.body.current.revision]).toEqual([412, 2]);
  });

  test('keeps a temperature in a unit that can be counted with', async () => {
    const trace = await seedTrace(app, seedRun(app).id, {
      facts: { quantity: 'voltage', mapping: { ...plainMapping, unit: 'V' } },
    });
    const answer = await app
      .as('contributor')
      .patch(`/api/traces/${trace.id}`)
      .set('If-Match', '"1"')
      .send({ quantity: 'temperature' });
    expect(answer.body).toMatchObject({ code: 'invalid-input', fields: [{ path: 'unit' }] });
  });

  test('that removes it can be taken back, once', async () => {
    const { id: runId } = seedRun(app);
    const trace = await seedTrace(app, runId);
    const as = app.as('contributor');
    expect((await as.delete(`/api/traces/${trace.id}`)).status).toBe(428);
    expect((await as.delete(`/api/traces/${trace.id}`).set('If-Match', '"1"')).status).toBe(204);
    expect((await as.get(`/api/runs/${runId}/traces`)).body.items).toEqual([]);
    expect((await as.get(`/api/traces/${trace.id}`)).status).toBe(404);
    const restore = () => as.post(`/api/traces/${trace.id}/restore`).set('If-Match', '"2"');
    expect((await restore()).body).toMatchObject({ id: trace.id, revision: 3 });
    expect((await restore()).status).toBe(404);
  });
});

describe('the points of a trace', () => {
  test('are told in run time, all or those of a window with a neighbour on each side', async () => {
    const trace = await seedTrace(app, seedRun(app).id, { facts: { runOffsetNs: 10e9 } });
    const points = async (query: object) =>
      (await app.as('contributor').get(`/api/traces/${trace.id}/points`).query(query)).body;
    expect(await points({})).toMatchObject({
      total: 4,
      isReduced: false,
      runTimesNs: [10e9, 11e9, 12e9, 13e9],
      values: [1, 0, -1, -2],
    });
    expect(await points({ fromNs: 12e9, toNs: 12e9 })).toMatchObject({ total: 1, values: [0, -1, -2] });
    expect(await points({ fromNs: 20e9 })).toMatchObject({ total: 0, values: [-2] });
  });

  test('keep a spike when they are too many', async () => {
    const rows = Array.from({ length: 30_000 }, (_, n) => `${n / 10},${n === 12_345 ? 99 : 20}`);
    const trace = await seedTrace(app, seedRun(app).id, { csv: rows.join('\n') });
    const { body } = await app.as('contributor').get(`/api/traces/${trace.id}/points`);
    expect(body).toMatchObject({ total: 30_000, isReduced: true });
    expect(body.values.length).toBeLessThanOrEqual(4000);
    expect(body.runTimesNs[body.values.indexOf(99)]).toBe(1234.5e9);
  });

  test('are asked for in numbers that there are', async () => {
    const trace = await seedTrace(app, seedRun(app).id);
    for (const query of [{ points: 5000 }, { points: 1 }, { fromNs: 'soon' }]) {
      const answer = await app.as('contributor').get(`/api/traces/${trace.id}/points`).query(query);
      expect(answer.status).toBe(422);
    }
  });
});

describe('a blind pass', () => {
  test('has no traces until it is finished', async () => {
    const recordingId = await seedRecording(app, { sharing: 'shared' });
    const { runId } = app.deps.services.recordings.get(app.actor('contributor'), recordingId);
    const trace = await seedTrace(app, runId);
    const passId = seedPass(app, recordingId);
    const list = async () => (await app.as('labeler').get(`/api/runs/${runId}/traces`)).body.items.length;
    expect(await list()).toBe(0);
    for (const rest of ['', '/points', '/recalescence', '/file'])
      expect((await app.as('labeler').get(`/api/traces/${trace.id}${rest}`)).status).toBe(404);
    app.deps.services.passes.finish(app.actor('labeler'), passId, 'Looked at elsewhere.');
    expect(await list()).toBe(1);
  });
});

describe('recalescence', () => {
  async function proposalsOf(facts: object = {}, mapping: object = loggerMapping) {
    const run = app.deps.services.runs.create(app.actor('contributor'), {
      ...seedRun(app),
      startedAt: null,
      ...facts,
    });
    const trace = await seedTrace(app, run.id, {
      csv: logger.toString('latin1'),
      facts: { mapping, runOffsetNs: -60e9 },
    });
    return (await app.as('contributor').get(`/api/traces/${trace.id}/recalescence`)).body;
  }

  test('of water is offered with its supercooling, counted from the melting point', async () => {
    const { proposals, remarks } = await proposalsOf();
    expect(proposals).toHaveLength(1);
    const [jump] = proposals;
    expect(Math.abs(jump.onsetNs)).toBeLessThan(2 * jump.onsetUncertaintyNs);
    expect(jump.supercoolingK).toBeCloseTo(8, 0);
    expect(jump.meltingPointFrom).toBe('water');
    // 0.01265 per kelvin of supercooling: 8 K freeze about a tenth.
    expect(jump.frozenShare).toBeCloseTo(0.1, 2);
    expect(jump.words).toContain('consistent with about 10 % of the water frozen in the flash');
    expect(remarks[0]).toContain('its lag delays the onset');
  });

  test('under pressure is counted from the melting point there', async () => {
    // 59.983 MPa: -5 °C by IAPWS R14-08(2011); the plateau at 0 °C then lies past it.
    const { proposals, remarks } = await proposalsOf({ pressurePa: 59.983e6 });
    expect(proposals).toEqual([]);
    expect(remarks[0]).toContain('\u22125.0 °C');
  });

  test.each([{ material: 'tin' }, { composition: 'with 3.5 % NaCl' }])(
    'of what has no known melting point is counted from the plateau: %o',
    async (facts) => {
      const { proposals } = await proposalsOf(facts);
      expect(proposals[0]).toMatchObject({ meltingPointFrom: 'plateau', frozenShare: null });
    },
  );

  test('is not looked for in what is no temperature', async () => {
    const trace = await seedTrace(app, seedRun(app).id, { facts: { quantity: 'other' } });
    const { body } = await app.as('contributor').get(`/api/traces/${trace.id}/recalescence`);
    expect(body).toMatchObject({ proposals: [], remarks: [expect.stringContaining('temperatures only')] });
  });
});
