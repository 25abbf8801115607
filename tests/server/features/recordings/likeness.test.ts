import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import type { GuardFinding } from '../../../../shared/contract/recordings.ts';
import type { Person } from '../../../../shared/contract/people.ts';
import {
  selectFindings,
  selectRecordingRow,
} from '../../../../server/features/recordings/recordings.queries.ts';
import { addDampedSine } from '../../../../server/setup/demo-audio/damped-sine.ts';
import { between, seededRandom } from '../../../../shared/lib/seeded-random.ts';
import { infoChunk } from '../../../../server/setup/demo-audio/metadata-chunks.ts';
import { seedMeasured, setSharing, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { pinkNoiseSignal } from '../../../support/wav/signals.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

type Who = Parameters<TestApp['actor']>[0];
const get = (who: Who, id: string) => app.deps.services.recordings.get(app.actor(who), id);
const kindsOf = (id: string): GuardFinding['kind'][] =>
  selectFindings(app.deps.db, id).map(({ kind }) => kind);
const sharingOf = (id: string) => selectRecordingRow(app.deps.db, id)?.sharing;

const sampleRateHz = 32_000;

/** 24 s of cracks in noise. */
function cracks(seed: number): Float32Array {
  const random = seededRandom(seed);
  const samples = pinkNoiseSignal(24 * sampleRateHz, 0.003, seed);
  for (let n = 0; n < 100; n++) {
    const frequencyHz = 1500 * 8 ** random();
    const decayS = between(random, [10, 60]) / frequencyHz;
    const onsetSample = Math.floor(random() * samples.length);
    const amplitude = 0.003 * 10 ** between(random, [0, 1.3]);
    addDampedSine(samples, 0, { onsetSample, frequencyHz, decayS, amplitude }, sampleRateHz);
  }
  return samples;
}

describe('a copy of a recording that its contributor may see', () => {
  test('is shared, and both pages lead to the other', async () => {
    const first = await seedMeasured(app, { fileName: 'first.wav' });
    const second = await seedMeasured(app, { fileName: 'second.wav' });
    expect(sharingOf(second)).toBe('shared');
    expect(get('contributor', second).likenesses).toMatchObject([
      { kind: 'same-file', recordingId: first, fileName: 'first.wav', offsetS: 0 },
    ]);
    expect(get('contributor', first).likenesses).toMatchObject([{ kind: 'same-file', recordingId: second }]);
  });

  test('is found under another header, in more bits, and as one channel of two', async () => {
    const samples = pinkNoiseSignal(48_000, 0.1, 1).map((x) => Math.round(x * 32_768) / 32_768);
    const wav = (extra: object) => smallWav({ channels: [samples], ...extra });
    const first = await seedMeasured(app, { wav: wav({}) });
    for (const extra of [
      { bitsPerSample: 24 },
      { encoding: 'float', bitsPerSample: 32 },
      { extraChunks: [infoChunk({ ISFT: 'a program' })] },
      { channels: [pinkNoiseSignal(48_000, 0.1, 2), samples] },
    ]) {
      const copy = await seedMeasured(app, { wav: wav(extra) });
      const found = get('contributor', copy).likenesses.find(({ recordingId }) => recordingId === first);
      expect(found, JSON.stringify(extra).slice(0, 80)).toMatchObject({
        kind: 'same-samples',
        otherChannel: 0,
      });
      expect(found?.channel).toBe('channels' in extra ? 1 : 0);
    }
  });

  test('is found where it is quieter, with fewer bits and a cut beginning, and says by how much', async () => {
    const samples = cracks(1);
    const original = await seedMeasured(app, {
      wav: smallWav({ sampleRateHz, channels: [samples], bitsPerSample: 24 }),
    });
    const part = samples.subarray(5 * sampleRateHz).map((x) => x / 2);
    const copy = await seedMeasured(app, { wav: smallWav({ sampleRateHz, channels: [part] }) });
    const other = await seedMeasured(app, { wav: smallWav({ sampleRateHz, channels: [cracks(2)] }) });
    const [found, ...rest] = get('contributor', copy).likenesses;
    expect(rest).toEqual([]);
    expect(found).toMatchObject({ kind: 'similar', recordingId: original });
    expect(Math.abs(found!.offsetS - 5)).toBeLessThan(0.15);
    expect(Math.abs(get('contributor', original).likenesses[0]!.offsetS + 5)).toBeLessThan(0.15);
    expect(get('contributor', other).likenesses).toEqual([]);
  });
});

describe('a copy of a recording that its contributor may not see', () => {
  const hidden = () => seedMeasured(app, { side: 'other', sensitivity: ['partner-agreement'] });

  test('waits for a reviewer, who alone is told', async () => {
    const other = await hidden();
    const copy = await seedMeasured(app);
    expect(sharingOf(copy)).toBe('held');
    expect(kindsOf(copy)).toEqual(['duplicate']);
    const seen = get('contributor', copy);
    expect(JSON.stringify(seen)).not.toContain(other);
    expect(seen).toMatchObject({ findings: [], likenesses: [] });
    expect(get('reviewer', copy).findings).toMatchObject([
      {
        kind: 'duplicate',
        sentence: expect.stringMatching(/^The same samples are stored in another recording/),
      },
    ]);
    expect(get('reviewer', copy).likenesses).toEqual([]);
  });

  test('is not told to a reviewer who brought it in', async () => {
    await hidden();
    const copy = await seedMeasured(app);
    const own = app.actor('reviewer');
    const member: Person['memberships'][number] = {
      labId: app.ownLabId,
      labName: 'own',
      role: 'contributor',
    };
    const both = { ...own, id: app.personIds.contributor, memberships: [...own.memberships, member] };
    expect(app.deps.services.recordings.get(both, copy).findings).toEqual([]);
    const [listed] = app.deps.services.reviews.list(both, { limit: 10 }).items;
    expect(listed).toMatchObject({ recordingId: copy, uploadedByMe: true, findings: [] });
  });

  test('is told once the other one is shared', async () => {
    const other = await hidden();
    const copy = await seedMeasured(app);
    setSharing(app, other, 'shared');
    expect(get('contributor', copy).likenesses).toMatchObject([{ recordingId: other }]);
  });

  test('is found by its fingerprint too', async () => {
    const samples = cracks(3);
    await seedMeasured(app, {
      ...{ side: 'other', sensitivity: ['unpublished-result'] },
      wav: smallWav({ sampleRateHz, channels: [samples] }),
    });
    const copy = await seedMeasured(app, {
      wav: smallWav({ sampleRateHz, channels: [samples.map((x) => 0.4 * x)] }),
    });
    expect(kindsOf(copy)).toEqual(['near-duplicate']);
    expect(sharingOf(copy)).toBe('held');
  });
});

test('two silent recordings are no copies of each other', async () => {
  const silent = (frames: number) => smallWav({ channels: [new Float32Array(frames)] });
  await seedMeasured(app, { side: 'other', sensitivity: ['other'], wav: silent(48_000) });
  const second = await seedMeasured(app, {
    wav: smallWav({ channels: [new Float32Array(48_000)], bitsPerSample: 24 }),
  });
  expect(kindsOf(second)).toEqual([]);
  expect(get('contributor', second).likenesses).toEqual([]);
});
