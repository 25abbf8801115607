import { describe, expect, it } from 'vitest';
import { courseSeries, rangeOf, secondTicks } from '@/components/recordings/course-plot.ts';
import { frequencyTicks, roundRange } from '@/components/recordings/plot-axes.ts';
import {
  curvesOf,
  spectrumData,
  spectrumSentence,
  widestGap,
} from '@/components/recordings/spectrum-plot.ts';
import { bandData, bandSentence, nameOfBand } from '@/components/recordings/band-plot.ts';
import { spectrumRows } from '@/components/recordings/spectrum-rows.ts';
import { measurement } from './recording-fixture.ts';

const spectrum = {
  channel: 0,
  frequenciesHz: [0, 100, 1000, 20_000, 100_000],
  quietDbPerHz: [-60, -70, -80, -90, -300],
  activeDbPerHz: [-60, -70, -79, -60, -250],
  medianDbPerHz: [-82, -88, -98, -96, -112],
  meanDbPerHz: [-75, -80, -90, -70, -108],
  maximumDbPerHz: [-50, -60, -70, -50, -100],
  bands: [],
};

describe('the plot of a spectrum', () => {
  it('leaves out zero frequency, which a logarithmic axis cannot show, and keeps the depths in sight', () => {
    const [hz, quiet, active] = spectrumData(spectrum);
    expect(hz).toEqual([100, 1000, 20_000, 100_000]);
    expect(quiet).toEqual([-70, -80, -90, -200]);
    expect(active).toEqual([-70, -79, -60, -200]);
  });

  it('is told in a sentence with the place where active and quiet differ most', () => {
    expect(widestGap(spectrumData(spectrum))).toBe(2);
    expect(spectrumSentence(spectrum)).toMatch(/at 20\u00A0kHz, by 30 dB/);
    expect(spectrumSentence({ ...spectrum, activeDbPerHz: null })).toContain('there is no active time');
  });

  it('has the curves that were measured: no active one without active time, no median in old views', () => {
    expect(curvesOf(spectrum)).toEqual(['quiet', 'active', 'median', 'mean', 'maximum']);
    expect(curvesOf({ ...spectrum, activeDbPerHz: null, medianDbPerHz: [], meanDbPerHz: [] })).toEqual([
      'quiet',
      'maximum',
    ]);
    const [, , active] = spectrumData({ ...spectrum, activeDbPerHz: null });
    expect(active).toEqual([null, null, null, null]);
  });

  it('is told in figures at round frequencies', () => {
    const rows = spectrumRows(spectrum);
    expect(rows.map(({ hz }) => hz)).toEqual([
      100, 200, 500, 1000, 2000, 5000, 10_000, 20_000, 50_000, 100_000,
    ]);
    expect(rows.find(({ hz }) => hz === 20_000)).toEqual({
      hz: 20_000,
      levelsDb: { quiet: -90, active: -60, median: -96, mean: -70, maximum: -50 },
    });
  });

  it('has ticks at the decades and at the end, never two that run into each other', () => {
    expect(frequencyTicks(94, 96_000)).toEqual([100, 1000, 10_000, 96_000]);
    expect(frequencyTicks(94, 500_000)).toEqual([100, 1000, 10_000, 100_000, 500_000]);
    expect(frequencyTicks(10, 12_000)).toEqual([10, 100, 1000, 12_000]);
  });

  it('rounds its range outwards', () => {
    expect(roundRange(-117, -62, 20)).toEqual([-120, -60]);
    expect(Object.is(roundRange(-37, -0.4, 10)[1], 0)).toBe(true);
  });
});

describe('the course through a recording', () => {
  const facts = { sampleRateHz: 1_000_000, hasUltrasound: true };

  it('shows level, ultrasonic level and candidates, each with a sentence', () => {
    const series = courseSeries(measurement().course, facts);
    expect(series.map(({ key }) => key)).toEqual(['level', 'ultrasonic', 'candidates']);
    expect(series[2]?.sentence).toMatch(/highest at 1\u00A0s with 12/);
  });

  it('leaves out what is withheld from whoever works blind', () => {
    const course = { ...measurement().course, ultrasonicDb: [null, null, null], candidates: [] };
    expect(courseSeries(course, facts).map(({ key }) => key)).toEqual(['level']);
  });

  it('shows no level above 20 kHz where nothing can be observed there', () => {
    const series = courseSeries(measurement().course, { ...facts, hasUltrasound: false });
    expect(series.map(({ key }) => key)).toEqual(['level', 'candidates']);
  });

  it('counts candidates from zero and levels down to a floor', () => {
    const [level, , candidates] = courseSeries(
      { ...measurement().course, levelDb: [-180, -40, null] },
      facts,
    );
    expect(candidates && rangeOf(candidates)).toEqual([0, 12]);
    expect(level && rangeOf(level)).toEqual([-100, -30]);
  });
});

describe('the axis of time', () => {
  const labels = (durationS: number, widthPx = 720) =>
    secondTicks(durationS, widthPx).map(({ label }) => label.replace('\u00A0', ' '));

  it('reads like a clock in a long recording, and in seconds in a short one', () => {
    expect(labels(280).slice(0, 3)).toEqual(['0:00', '1:00', '2:00']);
    expect(labels(12)).toEqual(['0 s', '2 s', '4 s', '6 s', '8 s', '10 s', '12 s']);
  });

  it('has fewer labels where there is less room', () => {
    expect(labels(12, 320)).toEqual(['0 s', '5 s', '10 s']);
  });
});

describe('the plot of bands', () => {
  const band = (middleHz: number, floorDb: number | null) => ({
    ...{ middleHz, lowHz: middleHz * 0.89, highHz: middleHz * 1.12 },
    ...{ floorDb, medianDb: -70, meanDb: -60, maximumDb: -40 },
  });
  const bands = [band(1000, -90), band(1258.925, -95), band(1584.893, null)];

  it('has the levels of each band at its middle, and none where it carries nothing', () => {
    expect(bandData(bands)).toEqual([
      [1000, 1258.925, 1584.893],
      [-90, -95, null],
      [-70, -70, -70],
      [-60, -60, -60],
      [-40, -40, -40],
    ]);
  });

  it.each([
    [25.119, '25 Hz'],
    [794.328, '800 Hz'],
    [3162.278, '3.15 kHz'],
    [19_952.6, '20 kHz'],
    [125_892.5, '125 kHz'],
  ])('calls the band about %d Hz by its nominal name', (middleHz, name) => {
    expect(nameOfBand({ middleHz }).replace(/\u00A0/g, ' ')).toBe(name);
  });

  it('is told in a sentence with the loudest floor', () => {
    expect(
      bandSentence(bands)
        .replace(/\u00A0/g, ' ')
        .replace('\u2212', '-'),
    ).toBe(
      'Noise floor by third octaves from 1 kHz to 1.6 kHz; highest at 1 kHz with -90.0 dB re full scale.',
    );
    expect(bandSentence([])).toBe('Noise floor by third octaves: nothing to show.');
  });
});
