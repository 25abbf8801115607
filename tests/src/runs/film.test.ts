import { describe, expect, it } from 'vitest';
import type { Video } from '@shared/contract/videos.ts';
import { filmFacts, lagWords, stepWords } from '@/composables/runs/film-words.ts';
import { planFollow } from '@/composables/runs/useFilmFollow.ts';

function video(facts: Partial<Video> = {}): Video {
  return {
    id: '018f0000-0000-7000-8000-000000000001',
    runId: '018f0000-0000-7000-8000-000000000002',
    fileName: 'stage.webm',
    container: 'webm',
    sha256: 'a'.repeat(64),
    sizeBytes: 7900,
    durationS: 4000,
    widthPx: 96,
    heightPx: 64,
    framesPerS: 30,
    runOffsetNs: null,
    clockPpm: 0,
    syncMarks: [],
    editable: true,
    createdAt: '2026-01-01T00:00:00.000Z',
    revision: 1,
    ...facts,
  };
}

const still = { currentS: 1, durationS: 10, isPaused: true };

describe('a film that follows the sound', () => {
  it('goes where the cursor is, and stays where it is there already', () => {
    expect(planFollow({ targetS: 2.5, rate: 0 }, still)).toEqual({ seekS: 2.5, playRate: null });
    expect(planFollow({ targetS: 1, rate: 0 }, still)).toEqual({ seekS: null, playRate: null });
  });

  it('plays as slowly as the sound, and is set right only where it is too far off', () => {
    const running = { ...still, isPaused: false };
    expect(planFollow({ targetS: 1.005, rate: 0.5 }, running)).toEqual({ seekS: null, playRate: 0.5 });
    expect(planFollow({ targetS: 1.5, rate: 0.5 }, running)).toEqual({ seekS: 1.5, playRate: 0.5 });
  });

  it('is set picture by picture where the sound is slower than any browser plays', () => {
    expect(planFollow({ targetS: 1.01, rate: 1 / 50 }, still)).toEqual({ seekS: 1.01, playRate: null });
  });

  it('stands at its nearer end where it does not reach', () => {
    expect(planFollow({ targetS: -3, rate: 1 }, still)).toEqual({ seekS: 0, playRate: null });
    expect(planFollow({ targetS: 99, rate: 1 }, still).seekS).toBeCloseTo(10, 2);
  });
});

describe('how well film and sound are in step', () => {
  it('is not told before the film has a place', () => {
    expect(stepWords(video())).toEqual(['Its place in the run is not set: the film does not follow yet.']);
  });

  it('names the drift in an hour and what a picture leaves open', () => {
    const syncMarks = [
      { videoS: 10, runTimeNs: 15e9 },
      { videoS: 3610.072, runTimeNs: 3615e9 },
    ];
    const words = stepWords(video({ runOffsetNs: 5e9, clockPpm: 20, syncMarks })).join(' ');
    expect(words).toContain('In step by 2\u00A0marks.');
    expect(words).toContain('20 ppm fast');
    expect(words).toContain('72\u00A0ms in an hour');
    expect(words).toContain('A picture lasts 33.3\u00A0ms');
    expect(words).toContain('\u00B117\u00A0ms');
    expect(words).not.toContain('off by');
  });

  it('takes no drift into account that pictures could not tell', () => {
    const syncMarks = [
      { videoS: 1, runTimeNs: 1e9 },
      { videoS: 21.001, runTimeNs: 21e9 },
    ];
    expect(stepWords(video({ runOffsetNs: 0, syncMarks })).join(' ')).toContain('none is taken into account');
  });

  it('says how much later sound comes in air', () => {
    expect(lagWords(null)).toContain('2.9\u00A0ms later for every metre');
    expect(lagWords(2)).toContain('5.8\u00A0ms later');
  });

  it('tells the film in figures', () => {
    expect(filmFacts(video())).toBe('96 \u00D7 64, 30 pictures/s, 1\u00A0h\u00A006\u00A0min, 7.9\u00A0kB');
  });
});
