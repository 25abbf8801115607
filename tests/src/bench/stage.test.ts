import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { labelSchemeV1 } from '@shared/domain/label-scheme.ts';
import { draftBetween, edgeAt, fractureAt } from '@/components/bench/pointer-work.ts';
import type { Fracture } from '@/components/bench/mark-drawing.ts';
import { withKeys } from '@/composables/bench/class-keys.ts';
import { frequencyAtY, frequencyTicks, yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import { defaultSpan } from '@/composables/bench/new-mark.ts';
import { placeStage, rowAt, splitAtY } from '@/composables/bench/stage-places.ts';

const places = placeStage({ widthPx: 1066, heightPx: 500, split: 0.6, topHz: 400_000 });
const view = { places, window: { startSample: 0, endSample: 10_000 } };

function fracture(values: Partial<Fracture>): Fracture {
  return {
    key: 'k',
    startSample: 5000,
    endSample: 6000,
    lowHz: null,
    highHz: null,
    glyph: '◆',
    kind: 'mark',
    isSelected: false,
    isLead: false,
    ...values,
  };
}

describe('stage', () => {
  it('puts its parts under one another without overlap, at any size and split', () => {
    const size = fc.record({
      widthPx: fc.integer({ min: 200, max: 4000 }),
      heightPx: fc.integer({ min: 380, max: 2000 }),
      split: fc.double({ min: 0, max: 1, noNaN: true }),
    });
    fc.assert(
      fc.property(size, (given) => {
        const { ultrasonic, lineTopPx, lineHeightPx, audible, ...stage } = placeStage({
          ...given,
          topHz: 96_000,
        });
        expect(ultrasonic.topPx + ultrasonic.heightPx).toBe(lineTopPx);
        expect(audible.topPx).toBe(lineTopPx + lineHeightPx);
        expect(audible.topPx + audible.heightPx).toBeLessThan(stage.waveTopPx);
        expect(stage.waveTopPx + stage.waveHeightPx).toBeLessThanOrEqual(stage.heightPx + 1);
      }),
    );
  });

  it('puts channels under one another without overlap, each with the same split', () => {
    const channels = [0, 1, 2, 3, 4, 5, 6, 7];
    const stack = placeStage({
      widthPx: 900,
      heightPx: 700,
      split: 0.6,
      topHz: 96_000,
      channels,
      channel: 3,
    });
    for (const [index, row] of stack.rows.entries()) {
      const next = stack.rows[index + 1];
      const bottom = row.topPx + row.heightPx;
      expect(row.audible.topPx + row.audible.heightPx).toBe(bottom);
      expect(bottom).toBeLessThan(next ? next.topPx : stack.waveTopPx);
      expect(row.ultrasonic.heightPx).toBe(stack.rows[0]?.ultrasonic.heightPx);
      expect(rowAt(row.topPx + 5, stack)?.channel).toBe(index);
    }
    expect(stack.waveTopPx + stack.waveHeightPx).toBeLessThanOrEqual(700);
    expect([stack.channel, stack.ultrasonic.topPx]).toEqual([3, stack.rows[3]?.topPx]);
    expect(rowAt(stack.waveTopPx + 3, stack)).toBeNull();
  });

  it('puts the hearing line where it was dragged to', () => {
    const y = 200;
    const moved = placeStage({ widthPx: 1066, heightPx: 500, split: splitAtY(y, places), topHz: 400_000 });
    expect(Math.abs(moved.lineTopPx + moved.lineHeightPx / 2 - y)).toBeLessThanOrEqual(1);
  });

  it('finds the frequency at a height and the height of a frequency', () => {
    for (const hz of [25_000, 150_000, 399_000])
      expect(frequencyAtY(yOfFrequency(hz, places.ultrasonic), [places.ultrasonic])).toBeCloseTo(hz, 3);
    expect(frequencyAtY(places.lineTopPx + 5, [places.ultrasonic, places.audible])).toBe(20_000);
  });

  it('labels frequencies in kilohertz, the unit at the top one', () => {
    const labels = frequencyTicks({ ...places.ultrasonic, heightPx: 200 }).map(({ label }) => label);
    expect(labels).toEqual(['100', '200', '300\u00A0kHz']);
  });

  it('takes hold of an edge within twelve pixels, of the selected mark only', () => {
    const x = places.gutterPx + 500;
    expect(edgeAt({ x: x - 11, y: 100 }, fracture({}), view)).toBe('start');
    expect(edgeAt({ x: x + 111, y: 100 }, fracture({}), view)).toBe('end');
    expect(edgeAt({ x: x + 50, y: 100 }, fracture({}), view)).toBeNull();
    expect(edgeAt({ x, y: 100 }, undefined, view)).toBeNull();
    expect(edgeAt({ x, y: 100 }, fracture({ kind: 'candidate' }), view)).toBeNull();
  });

  it('picks the mark before the candidate where both are near', () => {
    const list = [
      fracture({ key: 'c', kind: 'candidate', startSample: 5000 }),
      fracture({ startSample: 5030 }),
    ];
    expect(fractureAt({ x: places.gutterPx + 500, y: 50 }, list, view)?.key).toBe('k');
    expect(fractureAt({ x: places.gutterPx + 700, y: 50 }, list, view)).toBeNull();
  });

  it('draws a span with its band, and without a band over the waveform', () => {
    const from = { x: places.gutterPx + 200, y: 60 };
    const span = draftBetween(from, { x: places.gutterPx + 100, y: 160 }, view);
    expect([span.startSample, span.endSample]).toEqual([1000, 2000]);
    expect(span.lowHz).toBeLessThan(span.highHz ?? 0);
    const overWave = draftBetween({ ...from, y: 450 }, { x: places.gutterPx + 100, y: 480 }, view);
    expect([overWave.lowHz, overWave.highHz]).toEqual([null, null]);
  });

  it('sets a new mark as short as can be seen, inside the recording', () => {
    const options = { widthPx: 1000, frames: 192_000, sampleRateHz: 192_000 };
    const span = defaultSpan(500.7, { startSample: 0, endSample: 10_000 }, options);
    expect(span).toEqual({ startSample: 500, endSample: 580 });
    const whole = defaultSpan(191_999, { startSample: 0, endSample: 192_000 }, options);
    expect(whole).toEqual({ startSample: 191_999, endSample: 192_000 });
  });

  it('gives each class of the first scheme a key of its own for one hand', () => {
    const codes = withKeys([...labelSchemeV1]).map(({ code }) => code);
    expect(new Set(codes).size).toBe(labelSchemeV1.length);
    expect(codes.every((code) => /^Key[QWERTASDFGZXCVB]$/.test(code ?? ''))).toBe(true);
  });
});
