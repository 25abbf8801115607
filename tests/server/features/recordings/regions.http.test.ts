import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { regionReportSchema } from '../../../../shared/contract/region.ts';
import { quietLevelsSchema } from '../../../../shared/contract/views.ts';
import { seedMeasured, seedRecording } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let id: string;
beforeAll(async () => {
  app = createTestApp();
  id = await seedMeasured(app, { sharing: 'shared' });
});
afterAll(() => app.close());

const get = (tail: string) => app.as('contributor').get(`/api/recordings/${id}${tail}`);

describe('a region', () => {
  test('is measured on the samples, with a quiet stretch that does not touch it', async () => {
    const { body } = await get('/region?startSample=9500&endSample=11500');
    const { region, quiet } = regionReportSchema.parse(body);
    expect(region).toMatchObject({ startSample: 9500, endSample: 11_500 });
    expect(region.spectrum?.method).toBe('welch');
    expect(region.peakFrequencyHz).toBeGreaterThan(29_000);
    expect(region.shareAbove20kHz).toBeGreaterThan(0.9);
    expect(quiet!.endSample <= 9500 || quiet!.startSample >= 11_500).toBe(true);
    expect(quiet!.endSample - quiet!.startSample).toBe(2000);
  });

  test('is cut where the recording ends, and has no comparison where it is all of it', async () => {
    const { body } = await get('/region?startSample=0&endSample=3999999');
    const { region, quiet } = regionReportSchema.parse(body);
    expect(region.endSample).toBeLessThan(3_999_999);
    expect(quiet).toBeNull();
  });

  test('is refused in words where it is empty, too long, or nowhere', async () => {
    const details = async (tail: string) => {
      const answer = await get(`/region?${tail}`);
      return [answer.status, JSON.stringify(answer.body)] as const;
    };
    expect((await details('startSample=5&endSample=5'))[1]).toContain('must lie after the start');
    expect((await details('startSample=0&endSample=4000001'))[1]).toContain('at most 4,000,000 samples');
    expect((await details('startSample=900000000&endSample=900000010'))[1]).toContain('after the end');
    expect((await details('channel=9&startSample=0&endSample=100'))[0]).toBe(404);
  });

  test('does not exist before the measurement', async () => {
    const queued = await seedRecording(app);
    for (const tail of ['/region?startSample=0&endSample=10', '/spectrogram/quiet'])
      expect((await app.as('contributor').get(`/api/recordings/${queued}${tail}`)).status).toBe(409);
  });
});

describe('quiet levels', () => {
  test('are the same when they are asked for twice, and a channel that is not there has none', async () => {
    const [first, second] = await Promise.all([get('/spectrogram/quiet'), get('/spectrogram/quiet')]);
    expect(quietLevelsSchema.parse(first.body).pictures).not.toHaveLength(0);
    expect(second.body).toEqual(first.body);
    expect((await get('/spectrogram/quiet?channel=40')).status).toBe(404);
  });
});
