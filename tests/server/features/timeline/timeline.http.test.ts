import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { updateRecording } from '../../../../server/features/recordings/recordings.queries.ts';
import { countOnsets } from '../../../../server/features/timeline/timeline.map.ts';
import { seedAssigned, seedMark } from '../../../support/server/seed-marking.ts';
import { seedPhasePass } from '../../../support/server/seed-phases.ts';
import { seedMeasured, seedPass, seedRecording, smallWav } from '../../../support/server/seed-recordings.ts';
import { dampedSines, mix, whiteNoiseSignal } from '../../../support/wav/signals.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const onsets = [9_700, 24_100, 38_500];

/** Half a second at 96 kHz; in silence the detector has no floor to judge by. */
function burstsInNoise(): Uint8Array {
  const bursts = onsets.map((onsetSample) => ({
    onsetSample,
    amplitude: 0.5,
    frequencyHz: 30_000,
    decayS: 0.0005,
  }));
  const noise = whiteNoiseSignal(48_000, 0.0005, 11);
  return smallWav({ channels: [mix(dampedSines(48_000, bursts, 96_000), noise)] });
}

const runOf = (recordingId: string) =>
  app.deps.services.recordings.get(app.actor('contributor'), recordingId).runId;
const timeline = async (who: 'contributor' | 'labeler', recordingId: string, query = '') =>
  (
    await app
      .as(who)
      .get(`/api/runs/${runOf(recordingId)}/timeline${query}`)
      .expect(200)
  ).body;
const sum = (counts: number[]) => counts.reduce((all, count) => all + count, 0);

describe('the timeline of a run', () => {
  test('lays a recording on the clock of the run, with level and candidates over time', async () => {
    const id = await seedMeasured(app, { sharing: 'shared', wav: burstsInNoise() });
    updateRecording(app.deps.db, id, { runOffsetNs: 2_000_000_000 });
    const { recordings, counted, leftOut } = await timeline('contributor', id);
    expect({ counted, leftOut }).toEqual({ counted: 'candidates', leftOut: 0 });
    expect(recordings).toMatchObject([
      {
        id,
        isPlaceKnown: true,
        frames: 48_000,
        pieces: [{ startSample: 0, endSample: 48_000, startNs: 2e9, endNs: 2.5e9 }],
      },
    ]);
    // The file holds three bursts.
    const { counts, samplesPerStep } = recordings[0].course;
    const steps = counts.flatMap((count: number, step: number) => (count > 0 ? [step] : []));
    expect(steps).toEqual(onsets.map((onset) => Math.floor(onset / samplesPerStep)));
  });

  test('says where the place of a recording is not known, and has no course before it is measured', async () => {
    const id = await seedRecording(app);
    const { recordings } = await timeline('contributor', id);
    expect(recordings).toMatchObject([{ isPlaceKnown: false, course: null, pieces: [{ startNs: 0 }] }]);
  });

  test('counts marks instead where they are asked for', async () => {
    const assigned = await seedAssigned(app, { blind: false });
    await seedMark(app, assigned);
    const marks = await timeline('labeler', assigned.recordingId, '?counted=marks');
    expect(marks.counted).toBe('marks');
    expect(sum(marks.recordings[0].course.counts)).toBe(1);
  });

  test('withholds every count from whoever works blind, and keeps the level', async () => {
    const { recordingId } = await seedAssigned(app, { blind: true });
    for (const query of ['', '?counted=marks']) {
      const { counted, recordings } = await timeline('labeler', recordingId, query);
      expect(counted).toBeNull();
      expect(recordings[0].course.counts).toBeNull();
      expect(recordings[0].course.levelDb.length).toBeGreaterThan(0);
    }
  });

  test('withholds the counts of every recording of the run for a blind pass on one of them', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    const second = await seedMeasured(app, { sharing: 'shared' });
    updateRecording(app.deps.db, second, { runId: runOf(id) });
    seedPass(app, id, { blind: true });
    seedPass(app, second, { blind: false });
    const { recordings } = await timeline('labeler', id);
    expect(recordings).toHaveLength(2);
    expect(recordings.map(({ course }: { course: { counts: unknown } }) => course.counts)).toEqual([
      null,
      null,
    ]);
  });

  test('tells nothing of the sound in a pass for growth phases', async () => {
    const id = await seedMeasured(app, { sharing: 'shared' });
    seedPhasePass(app, id);
    const { recordings } = await timeline('labeler', id);
    expect(recordings).toMatchObject([{ id, course: null }]);
  });
});

test('onsets fall into the step in which they lie, the last step takes the end', () => {
  const course = { samplesPerStep: 100, levelDb: [null, -50, -60] };
  expect(countOnsets([0, 99, 100, 299, 300], course)).toEqual([2, 1, 2]);
  expect(countOnsets([], course)).toEqual([0, 0, 0]);
});
