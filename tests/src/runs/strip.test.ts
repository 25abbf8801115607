import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { TimelineRecording } from '@shared/contract/timeline.ts';
import { stripNames, stripWordsAt, windowWords } from '@/components/runs/freeze-words.ts';
import { lanesOf } from '@/composables/runs/phase-lanes.ts';
import { phasesAtWords, ribbonWords } from '@/composables/runs/phase-words.ts';
import { pixelAtRunTime, placeNote, runTimeAtPixel, stripSpan } from '@/composables/runs/run-axis.ts';
import { levelColumns, rateColumns } from '@/composables/runs/strip-columns.ts';
import { traceValueAt, valueRange } from '@/composables/runs/strip-trace.ts';

/** Four seconds at 1000 Hz from run time 2 s on, in steps of half a second. */
function recording(facts: Partial<TimelineRecording> = {}): TimelineRecording {
  return {
    id: '018f0000-0000-7000-8000-000000000001',
    fileName: 'run.wav',
    sampleRateHz: 1000,
    frames: 4000,
    isPlaceKnown: true,
    pieces: [{ startSample: 0, endSample: 4000, startNs: 2e9, endNs: 6e9 }],
    course: {
      samplesPerStep: 500,
      levelDb: [-60, -60, -40, -50, null, -60, -60, -60],
      counts: [0, 4, 8, 0, 0, 0, 0, 2],
    },
    ...facts,
  };
}

describe('the rate of events over a run', () => {
  it('is a count per second, in columns that know nothing of the steps', () => {
    const rates = rateColumns([recording()], { span: { startNs: 0, endNs: 8e9 }, columns: 4 });
    // Two seconds each: nothing recorded, 12 in 2 s, 2 in 2 s, nothing recorded.
    expect(rates).toEqual([null, 6, 1, null]);
  });

  it('cuts a step where a column ends', () => {
    const rates = rateColumns([recording()], { span: { startNs: 2.75e9, endNs: 3.25e9 }, columns: 1 });
    expect(rates[0]).toBeCloseTo((2 + 4) / 0.5, 9);
  });

  it('counts everything once, whatever the columns', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 700 }), (columns) => {
        const grid = { span: { startNs: 1e9, endNs: 7.5e9 }, columns };
        const columnS = 6.5 / columns;
        const all = rateColumns([recording()], grid).reduce<number>(
          (sum, rate) => sum + (rate ?? 0) * columnS,
          0,
        );
        expect(all).toBeCloseTo(14, 6);
      }),
    );
  });

  it('leaves the gaps of a capture set empty', () => {
    const gapped = recording({
      pieces: [
        { startSample: 0, endSample: 1000, startNs: 0, endNs: 1e9 },
        { startSample: 1000, endSample: 4000, startNs: 5e9, endNs: 8e9 },
      ],
    });
    expect(rateColumns([gapped], { span: { startNs: 0, endNs: 8e9 }, columns: 8 })).toEqual([
      4,
      null,
      null,
      null,
      null,
      8,
      0,
      2,
    ]);
  });

  it('is not there where the server withholds it, and the level is', () => {
    const blind = recording({ course: { samplesPerStep: 500, levelDb: Array(8).fill(-50), counts: null } });
    const grid = { span: { startNs: 2e9, endNs: 6e9 }, columns: 4 };
    expect(rateColumns([blind], grid)).toEqual([null, null, null, null]);
    expect(levelColumns([blind], grid)).toEqual([-50, -50, -50, -50]);
    expect(stripNames({ counted: null, recordings: [blind], traces: [] })).toEqual(['level']);
  });
});

it('the level of a column is the highest in it', () => {
  const levels = levelColumns([recording()], { span: { startNs: 2e9, endNs: 6e9 }, columns: 2 });
  expect(levels).toEqual([-40, -60]);
});

describe('the words of the strip', () => {
  const phases = [
    { phase: 'recalescence', startNs: 3e9, endNs: 4e9 },
    { phase: 'dendritic-growth', startNs: 3.5e9, endNs: 6e9 },
  ] as const;
  const traces = [
    {
      id: 't',
      name: 'thermocouple',
      unit: '\u00B0C',
      points: [
        { ns: 2e9, value: -10 },
        { ns: 4e9, value: 0 },
      ],
      recalescences: [],
    },
  ];
  const facts = {
    span: { startNs: 2e9, endNs: 6e9 },
    recordings: [recording()],
    phases: phases as never,
    traces,
  };

  it('tell time, phases, rate and temperature', () => {
    expect(stripWordsAt(3.75e9, { ...facts, counted: 'candidates' })).toBe(
      '3.750\u00A0s, recalescence and dendritic growth, 0 candidates/s, \u22121.3\u00A0\u00B0C',
    );
    expect(windowWords({ startNs: 3e9, endNs: 3.2e9 }, phases as never)).toBe(
      '3.000\u00A0s to 3.200\u00A0s of the run, recalescence',
    );
  });

  it('name no rate where none may be counted', () => {
    expect(stripWordsAt(3.75e9, { ...facts, traces: [], phases: [], counted: null })).toBe('3.750\u00A0s');
  });

  it('read the ribbon out', () => {
    expect(ribbonWords([])).toBe('No growth phases');
    expect(ribbonWords(phases)).toContain('recalescence, 3.000\u00A0s to 4.000\u00A0s; dendritic growth');
    expect(phasesAtWords(phases, 6e9)).toBe('');
  });

  it('say where a place in the run is not known', () => {
    expect(placeNote([{ isPlaceKnown: true }])).toBe('');
    expect(placeNote([{ isPlaceKnown: false }])).toContain('Place in the run not known');
    expect(placeNote([{ isPlaceKnown: false }, { isPlaceKnown: true }])).toContain('of 1 of 2 recordings');
  });
});

describe('phases that overlap', () => {
  it('stand in lanes of their own', () => {
    const spans = [
      { startNs: 0, endNs: 10 },
      { startNs: 5, endNs: 8 },
      { startNs: 8, endNs: 12 },
      { startNs: 10, endNs: 11 },
    ];
    expect(lanesOf(spans)).toEqual([0, 1, 1, 0]);
  });

  it('that adjoin share one', () => {
    const next = fc.array(fc.integer({ min: 1, max: 1e9 }), { maxLength: 40 });
    fc.assert(
      fc.property(next, (lengths) => {
        let startNs = 0;
        const spans = lengths.map((length) => ({ startNs, endNs: (startNs += length) }));
        expect(lanesOf(spans).every((lane) => lane === 0)).toBe(true);
      }),
    );
  });
});

describe('the axis of the run', () => {
  it('leads from pixels to times and back', () => {
    const span = { startNs: -2e9, endNs: 8e9 };
    expect(pixelAtRunTime(3e9, span, 1000)).toBe(500);
    expect(runTimeAtPixel(500, span, 1000)).toBe(3e9);
  });

  it('holds recordings and phases, and a second where there is nothing', () => {
    expect(stripSpan([recording()], [{ startNs: 1e9, endNs: 2e9 }])).toEqual({ startNs: 1e9, endNs: 6e9 });
    expect(stripSpan([], [])).toEqual({ startNs: 0, endNs: 1e9 });
  });
});

describe('the temperature at a time', () => {
  const trace = {
    points: [
      { ns: 0, value: 4 },
      { ns: 10, value: -6 },
    ],
  };
  it('lies on the line between two points, and nowhere beyond them', () => {
    expect([0, 5, 10].map((ns) => traceValueAt(trace, ns))).toEqual([4, -1, -6]);
    expect([-1, 11].map((ns) => traceValueAt(trace, ns))).toEqual([null, null]);
  });

  it('has a range that is never empty', () => {
    expect(valueRange([trace])).toEqual({ low: -6, high: 4 });
    expect(valueRange([{ points: [{ ns: 0, value: 3 }] }])).toEqual({ low: 3, high: 4 });
    expect(valueRange([])).toBeNull();
  });
});
