import { existsSync, readFileSync, rmSync } from 'node:fs';
import path from 'node:path';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { DeclaredLayout } from '../../../../shared/contract/layouts.ts';
import type { Recording } from '../../../../shared/contract/recordings.ts';
import { measurements } from '../../../../server/db/schema/measurements.ts';
import { encodeFrames } from '../../../../server/setup/demo-audio/encode-frames.ts';
import { seedRun, seedSetup } from '../../../support/server/seed-recordings.ts';
import { asciiBytes } from '../../../../shared/audio/wav-envelope.ts';
import { nothingStored, storedState } from '../../../support/server/stored-state.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { complete, sendWhole } from '../../../support/server/tus.ts';
import { fixtureBytes, formatFixture } from '../../../support/wav/format-fixtures.ts';
import { dampedSines } from '../../../support/wav/signals.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const rawLayout: DeclaredLayout = {
  kind: 'raw',
  encoding: 'signed',
  bitsPerSample: 16,
  byteOrder: 'big',
  channels: 1,
  sampleRateHz: 96_000,
  headerBytes: 64,
};

/** Half a second with a burst of 30 kHz, behind a header of 64 bytes, the higher byte first. */
function bigEndianBurst(): { bytes: Uint8Array; samples: Float32Array } {
  const burst = { onsetSample: 24_000, amplitude: 0.5, frequencyHz: 30_000, decayS: 0.0005 };
  const samples = dampedSines(48_000, [burst], 96_000);
  const data = encodeFrames([samples], { encoding: 'integer', bitsPerSample: 16, channels: 1 });
  return { bytes: Buffer.concat([Buffer.alloc(64, 1), Buffer.from(data).swap16()]), samples };
}

async function brought(bytes: Uint8Array, facts: object): Promise<Recording> {
  const id = await sendWhole(app, bytes, facts);
  const answer = await complete(app, id);
  expect([answer.status, answer.body.detail]).toEqual([200, undefined]);
  await app.runJobs();
  const { body } = await app.as('contributor').get(`/api/recordings/${answer.body.recording.id}`);
  return body;
}

const audioOf = (id: string) => app.as('contributor').get(`/api/recordings/${id}/audio`).buffer(true);
const copyOf = (id: string) => path.join(app.deps.config.paths.working, id, 'audio.wav');
/** Sample by sample. */
function peaksOf(id: string, startSample: number, endSample: number) {
  const query = { channel: 0, startSample, endSample, points: endSample - startSample };
  return app.as('contributor').get(`/api/recordings/${id}/peaks`).query(query);
}

describe('a FLAC file', () => {
  test('is measured like any other, and given back byte by byte under its own type', async () => {
    const { bytes, sampleRateHz, samples } = formatFixture('sox-1mhz.flac');
    const recording = await brought(bytes, { fileName: 'fast.flac' });
    expect(recording).toMatchObject({ processing: 'measured', sampleRateHz, channels: 2, frames: 300 });
    expect(recording.format).toMatchObject({ container: 'FLAC', bitsPerSample: 24, warnings: [] });
    expect(recording.measurement?.format.container).toBe('FLAC');
    expect(recording.layout).toBeNull();
    const audio = await audioOf(recording.id).parse((res, done) => {
      const parts: Buffer[] = [];
      res.on('data', (part: Buffer) => parts.push(part));
      res.on('end', () => done(null, Buffer.concat(parts)));
    });
    expect(audio.headers['content-type']).toBe('audio/flac');
    expect(Buffer.compare(audio.body, bytes)).toBe(0);
    const { body } = await peaksOf(recording.id, 0, 300);
    expect(body.maximum).toEqual([...samples[0]!].map((sample) => expect.closeTo(sample, 6)));
  });

  test('whose working copy is gone has it made again when it is looked at', async () => {
    const recording = await brought(fixtureBytes('ff-24.flac'), { fileName: 'again.flac' });
    rmSync(path.dirname(copyOf(recording.id)), { recursive: true });
    expect((await peaksOf(recording.id, 0, 240)).status).toBe(200);
    expect(existsSync(copyOf(recording.id))).toBe(true);
  });

  test('that names a person is held', async () => {
    const recording = await brought(fixtureBytes('ff-tags.flac'), { fileName: 'tags.flac' });
    expect(recording.sharing).toBe('held');
    expect(recording.findings.map(({ place }) => place)).toEqual(['Vorbis/ARTIST', 'Vorbis/LOCATION']);
  });

  test('that is damaged fails with a sentence, at once', async () => {
    const bytes = fixtureBytes('ff-16.flac');
    bytes[30]! ^= 1;
    const recording = await brought(bytes, { fileName: 'damaged.flac' });
    expect(recording).toMatchObject({ processing: 'failed' });
    expect(recording.failure).toMatch(/^The FLAC file is damaged/);
    expect(existsSync(path.dirname(copyOf(recording.id)))).toBe(false);
  });

  test('cut within its last frame is as long as what is there, with a warning', async () => {
    const whole = fixtureBytes('ff-blocks.flac');
    const recording = await brought(whole.subarray(0, whole.length - 60), { fileName: 'cut.flac' });
    expect(recording).toMatchObject({ processing: 'measured', frames: 1920 });
    expect(recording.format.warnings).toEqual([
      'The file is cut short: 380 frames of audio are missing (17 % of what its header says). The 1,920 that are there were taken.',
    ]);
  });
});

describe('a table of numbers', () => {
  const trace = new Uint8Array(readFileSync('fixtures/ae-sensor/AE_frontcenter_S100V.csv'));
  const layout: DeclaredLayout = {
    kind: 'CSV',
    timeColumn: 0,
    timeUnit: 's',
    sampleRateHz: null,
    valueColumns: [1],
    unit: 'V',
  };

  test('in volts is measured as parts of the full scale of its set-up, which stays with it', async () => {
    const recording = await brought(trace, { fileName: 'trace.csv', layout });
    expect(recording).toMatchObject({ processing: 'measured', sampleRateHz: 10_000_000, frames: 15_360 });
    expect(recording.layout).toEqual({ ...layout, fullScaleV: 2 });
    expect(recording.format).toMatchObject({ container: 'CSV', encoding: 'float', bitsPerSample: 64 });
    expect(recording.format.warnings).toEqual(['The largest value is 4.258 V, above the full scale of 2 V.']);
    const { body } = await peaksOf(recording.id, 0, 2);
    // The first two values of the file, over 2 V.
    expect(body.maximum).toEqual([
      expect.closeTo(-0.00114944458007812 / 2, 8),
      expect.closeTo(-0.00119354248046875 / 2, 8),
    ]);
    expect((await audioOf(recording.id)).headers['content-type']).toContain('text/csv');
  });

  test('with words among its numbers fails, and says in which line', async () => {
    const rows = Array.from({ length: 5000 }, (_, n) => (n === 4000 ? 'overflow' : String(n % 7)));
    const told = { ...layout, timeColumn: null, sampleRateHz: 1000, valueColumns: [0], unit: 'full-scale' };
    const recording = await brought(asciiBytes(rows.join('\n')), { fileName: 'words.csv', layout: told });
    expect(recording.failure).toBe(
      'Line 4,001 of the table does not hold a number in each of the declared columns.',
    );
  });

  test.each([
    ['with decimal commas', 't;U\n0,0;0,1\n0,1;0,2\n', {}, /decimal commas/],
    ['without the declared column', '0,1\n1,2\n', { valueColumns: [3] }, /No line of this table/],
    ['whose times stand still', '0,1\n0,2\n0,3\n', {}, /give no sample rate/],
  ])('%s is refused with a sentence', async (_, text, changes, sentence) => {
    const id = await sendWhole(app, asciiBytes(text), { layout: { ...layout, ...changes } });
    const answer = await complete(app, id);
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toMatch(sentence);
  });

  test('without a layout is refused as a text file', async () => {
    const answer = await complete(app, await sendWhole(app, trace));
    expect(answer.body.detail).toContain('declared what its columns hold');
  });
});

describe('a capture set', () => {
  test('is measured, and its segments have their place on the clock of the run', async () => {
    const bytes = fixtureBytes('captures.zip');
    const recording = await brought(bytes, { fileName: 'set.zip', runOffsetNs: 60_000_000_000 });
    expect(recording).toMatchObject({
      processing: 'measured',
      frames: 480,
      channels: 3,
      sampleRateHz: 500_000,
    });
    expect(recording.captures).toEqual({ segments: 2, liveTimeNs: null });
    const { body } = await app.as('contributor').get(`/api/recordings/${recording.id}/segments`);
    expect(body.items).toEqual([
      { startSample: 0, frames: 240, runTimeNs: 60_000_000_000, preTriggerFrames: null },
      { startSample: 240, frames: 240, runTimeNs: 60_005_000_000, preTriggerFrames: null },
    ]);
    const row = app.deps.db
      .select()
      .from(measurements)
      .where(eq(measurements.recordingId, recording.id))
      .get();
    expect(row?.summary.quality.find(({ code }) => code === 'joints')).toMatchObject({ count: 1 });
    const { samples } = formatFixture('sox-s24-3ch.wav');
    const peaks = await peaksOf(recording.id, 240, 480);
    expect(peaks.body.maximum).toEqual([...samples[0]!].map((sample) => expect.closeTo(sample, 6)));
    expect((await audioOf(recording.id)).headers['content-type']).toContain('application/zip');
  });

  test('without a place on the clock of the run has segments without one', async () => {
    const recording = await brought(fixtureBytes('captures.zip'), { fileName: 'again.zip' });
    const { body } = await app.as('contributor').get(`/api/recordings/${recording.id}/segments`);
    expect(body.items.map(({ runTimeNs }: { runTimeNs: number | null }) => runTimeNs)).toEqual([null, null]);
  });

  test('that is an archive of something else is refused with a sentence', async () => {
    const answer = await complete(app, await sendWhole(app, fixtureBytes('renamed-zip.wav')));
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toContain('captures.json');
  });
});

describe('raw samples with a declared layout', () => {
  test('are measured, and the layout stays with them', async () => {
    const { bytes, samples } = bigEndianBurst();
    const recording = await brought(bytes, { fileName: 'burst.raw', layout: rawLayout });
    expect(recording).toMatchObject({ processing: 'measured', frames: 48_000, layout: rawLayout });
    expect(recording.format).toMatchObject({ container: 'raw', encoding: 'integer', bitsPerSample: 16 });
    const { body } = await peaksOf(recording.id, 24_000, 24_100);
    expect(body.maximum).toEqual([...samples.subarray(24_000, 24_100)].map((x) => expect.closeTo(x, 4)));
    // What a header of 64 bytes says is not known, so a reviewer looks.
    expect(recording.findings).toHaveLength(1);
    expect((await audioOf(recording.id)).headers['content-type']).toContain('application/octet-stream');
  });

  test('that lie as in a WAV file are read where they are', async () => {
    const samples = Float32Array.from({ length: 4800 }, (_, n) => Math.sin(n) / 2);
    const bytes = encodeFrames([samples], { encoding: 'float', bitsPerSample: 32, channels: 1 });
    const layout = {
      ...rawLayout,
      encoding: 'float',
      bitsPerSample: 32,
      byteOrder: 'little',
      headerBytes: 0,
    };
    const recording = await brought(bytes, { fileName: 'floats.raw', layout, timeExpansion: 10 });
    expect(recording).toMatchObject({ processing: 'measured', sampleRateHz: 960_000 });
    expect(recording.measurement?.format).toMatchObject({ container: 'raw', sampleRateHz: 960_000 });
    expect(existsSync(copyOf(recording.id))).toBe(false);
    const { body } = await peaksOf(recording.id, 0, 4800);
    expect(body.maximum[100]).toBeCloseTo(samples[100]!, 6);
  });

  test.each([
    ['of another length', bigEndianBurst().bytes.subarray(1), {}, /1 are left over/],
    ['of what is a WAV file', fixtureBytes('ff-s16.wav'), { headerBytes: 0 }, /This is a WAV file/],
    ['of what is a FLAC file', fixtureBytes('ff-16.flac'), { headerBytes: 0 }, /This is a FLAC file/],
  ])('%s are refused with a sentence and leave nothing', async (_, bytes, changes, sentence) => {
    const before = storedState(app);
    const id = await sendWhole(app, bytes, { layout: { ...rawLayout, ...changes } });
    const answer = await complete(app, id);
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toMatch(sentence);
    expect(storedState(app)).toEqual(before);
    expect(before).not.toEqual(nothingStored);
  });

  test.each([
    ['12 bits', { bitsPerSample: 12 }],
    ['64-bit integers', { bitsPerSample: 64 }],
    ['65 channels', { channels: 65 }],
    ['a rate of 0', { sampleRateHz: 0 }],
    ['a header of less than nothing', { headerBytes: -1 }],
    ['another kind', { kind: 'cooked' }],
  ])('of %s are no layout', async (_, changes) => {
    const facts = { runId: seedRun(app).id, setupId: seedSetup(app).id, licence: 'CC-BY-4.0' };
    const file = { fileName: 'x.raw', sizeBytes: 100, layout: { ...rawLayout, ...changes } };
    const answer = await app
      .as('contributor')
      .post('/api/uploads')
      .send({ ...facts, ...file });
    expect(answer.status).toBe(422);
    expect(JSON.stringify(answer.body)).toContain('layout');
  });

  test('come in one form too, with the layout as JSON', async () => {
    const { bytes } = bigEndianBurst();
    const form = (layout: string) =>
      app
        .as('contributor')
        .post(`/api/runs/${seedRun(app).id}/recordings`)
        .field('setupId', seedSetup(app).id)
        .field('licence', 'CC-BY-4.0')
        .field('layout', layout)
        .attach('file', Buffer.from(bytes), 'burst.raw');
    const answer = await form(JSON.stringify(rawLayout));
    expect([answer.status, answer.body.recording?.layout]).toEqual([201, rawLayout]);
    const broken = await form('{"kind":');
    expect([broken.status, JSON.stringify(broken.body).includes('layout')]).toEqual([422, true]);
  });
});
