import { describe, expect, it } from 'vitest';
import { activeSpanRows, benchStart, busiestSpans, spanMarks } from '@/components/recordings/active-spans.ts';

const SECOND = 1000;
const recording = { id: 'r', sampleRateHz: SECOND, frames: 200 * SECOND };
const short = { ...recording, frames: 45 * SECOND };

function span(fromS: number, toS: number, candidates: number, expectedByChance = 0.02) {
  const ratePerS = candidates / (toS - fromS);
  return { startSample: fromS * SECOND, endSample: toS * SECOND, candidates, ratePerS, expectedByChance };
}

describe('the stretches in which candidates are frequent', () => {
  it('are told with their time, counts, rate and chance, each a way to the bench with some time around it', () => {
    expect(activeSpanRows([span(130, 139.6, 215), span(190, 200, 9, 1.23)], recording)).toEqual([
      {
        ...{ key: '130000', name: '2:10 to 2:20', candidates: '215', ratePerS: '22', byChance: '< 0.1' },
        to: { path: '/bench/r', query: { from: '129040', to: '140560' } },
      },
      {
        ...{ key: '190000', name: '3:10 to 3:20', candidates: '9', ratePerS: '0.9', byChance: '1.2' },
        to: { path: '/bench/r', query: { from: '189000', to: '200000' } },
      },
    ]);
  });

  it('are told in hundredths of seconds where the recording is short', () => {
    expect(activeSpanRows([span(1.5, 1.52, 20)], short)[0]?.name).toBe('1.50\u00A0s to 1.52\u00A0s');
  });

  it('are the busiest ones in order of time, where there are too many', () => {
    const spans = [span(1, 2, 40), span(3, 4, 7), span(5, 6, 90), span(7, 8, 50)];
    expect(busiestSpans(spans, 3)).toEqual([spans[0], spans[2], spans[3]]);
    expect(busiestSpans(spans, 9)).toEqual(spans);
  });

  it('lie on the axis of time in seconds', () => {
    expect(spanMarks([span(130, 140, 215)], recording)).toEqual([{ fromS: 130, toS: 140 }]);
  });

  it('are where the bench opens a long recording: at the one with most candidates', () => {
    const spans = [span(10, 20, 40), span(130, 140, 215), span(150, 160, 3)];
    expect(benchStart(spans, recording)).toEqual(activeSpanRows(spans, recording)[1]?.to);
  });

  it('do not narrow a short recording, nor one that has none', () => {
    expect(benchStart([span(1, 2, 40)], short)).toBe('/bench/r');
    expect(benchStart([], recording)).toBe('/bench/r');
  });
});
