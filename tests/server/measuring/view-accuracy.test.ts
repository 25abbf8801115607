import { describe, expect, it } from 'vitest';
import { makeViewsSignal, VIEWS_RATE_HZ, viewsReference } from '../../reference/views-reference.ts';
import { compareViews, readViewValues } from '../../support/view-accuracy.ts';
import { measured } from './measured.ts';

async function errorsOfViews() {
  const { source } = await measured({
    sampleRateHz: VIEWS_RATE_HZ,
    channels: [makeViewsSignal()],
    bitsPerSample: 24,
  });
  return compareViews(await readViewValues(source.viewsDir), viewsReference);
}

describe('the stored views against numpy in float64', () => {
  it('differ in no column of the frames by more than 1e-5 in the median', async () => {
    const { medianRelative } = await errorsOfViews();
    expect(Object.keys(medianRelative).length).toBeGreaterThanOrEqual(10);
    for (const [column, error] of Object.entries(medianRelative)) expect(error, column).toBeLessThan(1e-5);
  });

  it('differ by at most one code in the pictures', async () => {
    const { codes } = await errorsOfViews();
    expect(codes.audible).toBeLessThanOrEqual(1);
    expect(codes.ultrasonic).toBeLessThanOrEqual(1);
  });

  it('hold the very least and greatest samples', async () => {
    expect((await errorsOfViews()).differingPeaks).toBe(0);
  });
});

describe('the comparison of views', () => {
  const changed = (of: Partial<typeof viewsReference>) =>
    compareViews({ ...viewsReference, ...of }, viewsReference);

  it('finds no error in the reference itself', () => {
    const { medianRelative, codes, differingPeaks } = changed({});
    expect(new Set(Object.values(medianRelative))).toEqual(new Set([0]));
    expect({ codes, differingPeaks }).toEqual({ codes: { audible: 0, ultrasonic: 0 }, differingPeaks: 0 });
  });

  it('tells an error of one column, of one code and of one peak', () => {
    const { columns } = viewsReference;
    const wrong = columns.indexOf('centroidAmplitudeHz');
    const frames = Array.from(viewsReference.frames, (value, i) =>
      i % columns.length === wrong ? value * 1.01 : value,
    );
    const audible = viewsReference.audible.map((code, i) => (i === 100 ? code + 2 : code));
    const peaks = viewsReference.peaks.map((value, i) => (i === 7 ? value + 1e-6 : value));
    const errors = changed({ frames, audible, peaks });
    expect(errors.medianRelative.centroidAmplitudeHz).toBeCloseTo(0.01, 6);
    expect(errors.medianRelative.spreadAmplitudeHz).toBe(0);
    expect(errors.codes.audible).toBe(2);
    expect(errors.differingPeaks).toBe(1);
  });
});
