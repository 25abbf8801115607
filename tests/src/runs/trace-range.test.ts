import { describe, expect, it } from 'vitest';
import { rangeAround, recordedRange } from '@/composables/runs/trace-range.ts';

const whole = { fromS: -10, toS: 1000 };

describe('the part of a run in which there are recordings', () => {
  it('reaches from the first to the last of them, with a tenth on either side', () => {
    const spans = [
      { fromS: 200, toS: 210 },
      { fromS: 100, toS: 130 },
    ];
    expect(recordedRange(spans, whole)).toEqual({ fromS: 89, toS: 221 });
  });

  it('does not leave the whole, and is no part where it is all of it', () => {
    expect(recordedRange([{ fromS: -10, toS: 500 }], whole)).toEqual({ fromS: -10, toS: 551 });
    expect(recordedRange([{ fromS: -10, toS: 1000 }], whole)).toBeNull();
    expect(recordedRange([], whole)).toBeNull();
    expect(rangeAround([])).toBeNull();
  });
});
