import { describe, expect, it } from 'vitest';
import type { MeasurementSummary } from '@shared/contract/measurement.ts';
import { topFrequency, unseenBands, wholeBandReason } from '@/composables/bench/unseen-bands.ts';
import type { BandFacts } from '@/composables/bench/unseen-bands.ts';

function facts(values: Partial<BandFacts>): BandFacts {
  return { sampleRateHz: 192_000, sensorLowHz: null, sensorHighHz: null, measurement: null, ...values };
}

function withEdge(effectiveHz: number): MeasurementSummary {
  return { bandwidth: { effectiveHz, edge: 'brick-wall', reason: '' } } as unknown as MeasurementSummary;
}

function reasonAbove(values: Partial<BandFacts>): string | null {
  const all = facts(values);
  return wholeBandReason(20_000, topFrequency(all.sampleRateHz), unseenBands(all));
}

describe('bands that cannot be seen', () => {
  it('hatches nothing where rate and sensor reach far', () => {
    expect(unseenBands(facts({}))).toEqual([]);
  });

  it('says that the rate ends where nothing above the hearing line is left', () => {
    expect(reasonAbove({ sampleRateHz: 48_000 })).toBe('the sample rate ends at 24\u00A0kHz');
    expect(reasonAbove({ sampleRateHz: 44_100 })).toMatch(/^the sample rate ends at 22/);
  });

  it('names the edge that a lossy codec left', () => {
    expect(reasonAbove({ measurement: withEdge(16_000) })).toBe('the file holds nothing above 16\u00A0kHz');
  });

  it('names the sensor whose band ends too early, though a little is left above 20 kHz', () => {
    expect(reasonAbove({ sensorHighHz: 22_000 })).toBe("the sensor's band ends at 22\u00A0kHz");
  });

  it('hatches only the part above a sensor that hears ultrasound', () => {
    expect(reasonAbove({ sensorHighHz: 85_000 })).toBeNull();
    expect(unseenBands(facts({ sensorHighHz: 85_000 }))).toEqual([
      { lowHz: 85_000, highHz: 96_000, reason: "the sensor's band ends at 85\u00A0kHz" },
    ]);
  });

  it('hatches the audible band of a sensor that starts above it', () => {
    const unseen = unseenBands(facts({ sensorLowHz: 60_000 }));
    expect(wholeBandReason(0, 20_000, unseen)).toBe("the sensor's band begins at 60\u00A0kHz");
  });
});
