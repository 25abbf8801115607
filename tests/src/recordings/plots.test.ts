import { describe, expect, it } from 'vitest';
import { courseSeries, rangeOf } from '@/components/recordings/course-plot.ts';
import { frequencyTicks, roundRange } from '@/components/recordings/plot-axes.ts';
import { spectrumData, spectrumSentence, widestGap } from '@/components/recordings/spectrum-plot.ts';
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

  it('is told in figures at round frequencies', () => {
    const rows = spectrumRows(spectrum);
    expect(rows.map(({ hz }) => hz)).toEqual([
      100, 200, 500, 1000, 2000, 5000, 10_000, 20_000, 50_000, 100_000,
    ]);
    expect(rows.find(({ hz }) => hz === 20_000)).toEqual({ hz: 20_000, quietDb: -90, activeDb: -60 });
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
