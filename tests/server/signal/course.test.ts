import { describe, expect, it } from 'vitest';
import { CourseTracker, joinChannelCourse, joinCourses, planCourse } from '../../../server/signal/course.ts';
import { forEachCell } from '../../../server/signal/sample-cells.ts';
import { sine } from '../../support/wav/signals.ts';

describe('the course', () => {
  it('has at most 1,000 steps that cover the recording', () => {
    for (const frames of [1, 1000, 999_999, 10_000_001]) {
      const { samplesPerStep, steps } = planCourse(frames, 128);
      expect(steps).toBeLessThanOrEqual(1000);
      expect(steps * samplesPerStep).toBeGreaterThanOrEqual(frames);
      expect((steps - 1) * samplesPerStep).toBeLessThan(frames);
    }
  });

  it('follows the level without its mean, null in silence, whatever the blocks and segments', () => {
    const plan = { samplesPerStep: 1024, steps: 3 };
    const samples = new Float32Array(2560);
    samples.set(sine(1024, 8, 1024, 0.1).map((x) => x + 0.3));
    samples.set(sine(512, 8, 1024, 0.01), 2048);
    const parts = [
      { startSample: 0, endSample: 1536 },
      { startSample: 1536, endSample: 2560 },
    ].map(({ startSample, endSample }) => {
      const tracker = new CourseTracker(plan, { startSample, endSample });
      for (let from = startSample; from < endSample; from += 333) {
        const to = Math.min(from + 333, endSample);
        forEachCell(samples, { from, to, startSample: from }, (cell) => tracker.push(cell));
      }
      if (startSample === 0) tracker.pushUltrasonic(1500, 0.0005);
      else tracker.pushUltrasonic(1999, 0.0015);
      return tracker.finish();
    });
    const course = joinCourses(plan, [joinChannelCourse(plan, parts)], Uint32Array.from([0, 2, 1]));
    expect(course.levelDb[0]).toBeCloseTo(-20, 2);
    expect(course.levelDb[1]).toBeNull();
    expect(course.levelDb[2]).toBeCloseTo(-40, 2);
    expect(course.ultrasonicDb).toEqual([null, expect.closeTo(10 * Math.log10(0.002), 6), null]);
    expect(course.candidates).toEqual([0, 2, 1]);
  });

  it('takes the loudest channel at each step', () => {
    const plan = { samplesPerStep: 100, steps: 2 };
    const channels = [
      { levelMeanSquares: Float64Array.from([0.5, 0.005]), ultrasonicMeanSquares: new Float64Array(2) },
      { levelMeanSquares: Float64Array.from([0.005, 0.5]), ultrasonicMeanSquares: new Float64Array(2) },
    ];
    const { levelDb } = joinCourses(plan, channels, new Uint32Array(2));
    expect(levelDb).toEqual([expect.closeTo(0, 9), expect.closeTo(0, 9)]);
  });
});
