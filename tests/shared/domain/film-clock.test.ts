import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  driftMs,
  filmRunTimeNs,
  filmSecondsAt,
  frameUncertaintyS,
  soundLagMs,
  syncFromMarks,
  worstMissS,
} from '../../../shared/domain/film-clock.ts';

/* Figures from outside: a frame at 30 a second is 33.3 ms, sound lags 2.914 ms a metre in air at 20 degrees C, and
   20 ppm are 72 ms in an hour (common practice; acoustics textbooks give 343.2 m/s). */
describe('sound and film in step', () => {
  it('drifts 72 ms in an hour at 20 ppm', () => {
    expect(driftMs(20, 3600)).toBeCloseTo(72, 9);
  });

  it('hears later than it sees: 2.914 ms a metre', () => {
    expect(soundLagMs(1)).toBeCloseTo(2.914, 3);
  });

  it('cannot tell an instant within a picture: 33.3 ms at 30 a second, half of it to either side', () => {
    expect(2 * frameUncertaintyS(30)).toBeCloseTo(0.0333, 4);
    expect(frameUncertaintyS(null)).toBe(frameUncertaintyS(30));
  });

  it('takes its place from one mark, which says nothing of the drift', () => {
    const sync = syncFromMarks([{ videoS: 4, runTimeNs: 10e9 }], 30);
    expect(sync).toEqual({ runOffsetNs: 6e9, clockPpm: 0, drift: null });
    expect(syncFromMarks([], 30)).toBeNull();
  });

  it('takes a drift from two marks an hour apart', () => {
    const clock = { runOffsetNs: 5e9, clockPpm: 20 };
    const marks = [10e9, 3610e9].map((runTimeNs) => ({ runTimeNs, videoS: filmSecondsAt(runTimeNs, clock) }));
    expect((marks[1]?.videoS ?? 0) - (marks[0]?.videoS ?? 0)).toBeCloseTo(3600.072, 6);
    const sync = syncFromMarks(marks, 30);
    expect(sync?.drift).toMatchObject({ isApplied: true });
    expect(sync?.clockPpm).toBeCloseTo(20, 4);
    expect(sync?.runOffsetNs).toBeCloseTo(5e9, -2);
    expect(worstMissS(marks, sync ?? clock)).toBeLessThan(1e-6);
  });

  it('leaves a drift alone that pictures cannot tell from none', () => {
    const clock = { runOffsetNs: 0, clockPpm: 20 };
    const marks = [1e9, 61e9].map((runTimeNs) => ({ runTimeNs, videoS: filmSecondsAt(runTimeNs, clock) }));
    const sync = syncFromMarks(marks, 30);
    // Half a picture at either mark: 0.0167 s * sqrt(2) / 60 s.
    expect(sync?.drift?.uncertaintyPpm).toBeCloseTo(392.8, 0);
    expect(sync).toMatchObject({ clockPpm: 0, drift: { isApplied: false } });
  });

  it('does not believe a clock that is off by more than any clock', () => {
    const sync = syncFromMarks(
      [
        { videoS: 0, runTimeNs: 0 },
        { videoS: 62, runTimeNs: 60e9 },
      ],
      1000,
    );
    expect(sync?.drift?.isApplied).toBe(false);
  });

  it('leads from the film to the run and back', () => {
    const clocks = fc.record({
      runOffsetNs: fc.integer({ min: -1e13, max: 1e13 }),
      clockPpm: fc.double({ min: -500, max: 500, noNaN: true }),
    });
    fc.assert(
      fc.property(clocks, fc.double({ min: 0, max: 36_000, noNaN: true }), (clock, videoS) => {
        expect(filmSecondsAt(filmRunTimeNs(videoS, clock), clock)).toBeCloseTo(videoS, 5);
      }),
    );
  });
});
