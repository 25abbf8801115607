import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { passes } from '../../../../server/db/schema/events.ts';
import { onsetAnswerSchema } from '../../../../shared/contract/onset.ts';
import { seedAssigned } from '../../../support/server/seed-marking.ts';
import { seedMeasured } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let id: string;
beforeAll(async () => {
  app = createTestApp();
  id = await seedMeasured(app, { sharing: 'shared' });
});
afterAll(() => app.close());

async function ask(tail: string, of = id) {
  const { body } = await app.as('contributor').get(`/api/recordings/${of}/onset?${tail}`);
  return onsetAnswerSchema.parse(body);
}

describe('the onset of a span', () => {
  test('is picked to the sample, also where the span begins a little late', async () => {
    const early = await ask('startSample=9450&endSample=9800');
    const late = await ask('startSample=9608&endSample=9800');
    expect(Math.abs(early.onsetSample! - 9600)).toBeLessThanOrEqual(2);
    expect(Math.abs(early.onsetSample! - late.onsetSample!)).toBeLessThanOrEqual(2);
    expect(early.uncertaintySamples).toBeGreaterThan(0.2);
    expect(early.reason).toBeNull();
  });

  test('is told in words where there is none', async () => {
    expect((await ask('startSample=2&endSample=400')).reason).toMatch(/begins with the recording/);
    const { onsetSample, reason } = await ask('startSample=3000&endSample=3400');
    expect([onsetSample, reason]).toEqual([null, expect.stringMatching(/stands out/)]);
  });

  test('is refused outside the recording, and for a channel that is not there', async () => {
    const get = (tail: string) => app.as('contributor').get(`/api/recordings/${id}/onset?${tail}`);
    const outside = await get('startSample=0&endSample=900000000');
    expect(JSON.stringify(outside.body)).toContain('after the end of the recording');
    expect((await get('channel=9&startSample=10&endSample=100')).status).toBe(404);
    expect((await get('startSample=9&endSample=9')).status).toBe(422);
  });

  test('may be asked for in a blind pass: it looks at the own span alone', async () => {
    const { recordingId } = await seedAssigned(app, { blind: true });
    const answer = await app
      .as('labeler')
      .get(`/api/recordings/${recordingId}/onset?startSample=9800&endSample=10200`);
    expect(answer.status).toBe(200);
  });

  test('is looked for inside the window alone where a blind pass has windows', async () => {
    const { recordingId, passId } = await seedAssigned(app, { blind: true });
    const windows = [{ startSample: 9400, endSample: 9700, stratum: 0 }];
    app.deps.db.update(passes).set({ windows }).where(eq(passes.id, passId)).run();
    const asked = async (tail: string, who: 'labeler' | 'contributor') => {
      const { body } = await app.as(who).get(`/api/recordings/${recordingId}/onset?${tail}`);
      return onsetAnswerSchema.parse(body);
    };
    const inside = await asked('startSample=9550&endSample=9800', 'labeler');
    expect(Math.abs((inside.onsetSample ?? 0) - 9600)).toBeLessThanOrEqual(2);
    const atEdge = await asked('startSample=9404&endSample=9800', 'labeler');
    expect(atEdge.reason).toBe(
      'The span begins with the window: there is no quiet before it to compare with.',
    );
    const outside = 'startSample=9390&endSample=9800';
    expect((await asked(outside, 'labeler')).reason).toBe(
      'The span begins outside the windows of this pass.',
    );
    expect((await asked(outside, 'contributor')).onsetSample).not.toBeNull();
  });
});
