import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { keptBand, moveKept, partsToPaint } from '@/components/bench/kept-image.ts';

/** What of a context makes pixels. */
function fakeContext(): CanvasRenderingContext2D {
  const createImageData = (width: number, height: number) => ({
    width,
    height,
    data: new Uint8ClampedArray(width * height * 4),
  });
  return { createImageData } as unknown as CanvasRenderingContext2D;
}

describe('pixels kept from drawing to drawing', () => {
  const size = { widthPx: 8, heightPx: 4 };

  it('are the same as long as name and size stay', () => {
    const context = fakeContext();
    expect(keptBand(context, 'audible', { ...size })).toBe(keptBand(context, 'audible', size));
  });

  it('are others for another size, another band and another canvas', () => {
    const context = fakeContext();
    const band = keptBand(context, 'audible', size);
    expect(keptBand(context, 'ultrasonic', size)).not.toBe(band);
    expect(keptBand(fakeContext(), 'audible', size)).not.toBe(band);
    const taller = keptBand(context, 'audible', { widthPx: 8, heightPx: 5 });
    expect(taller).not.toBe(band);
    expect(taller.image).toMatchObject({ width: 8, height: 5 });
  });

  it('show the same after any movements as a drawing anew would, and paint no column twice', () => {
    const moves = fc.array(fc.integer({ min: -12, max: 12 }), { minLength: 1, maxLength: 20 });
    fc.assert(
      fc.property(moves, (steps) => {
        const band = keptBand(fakeContext(), 'audible', { widthPx: 9, heightPx: 3 });
        let startPx = 1000;
        for (const step of [0, ...steps]) {
          startPx += step;
          const move = { key: 'k', startSample: startPx * 7, samplesPerPixel: 7 };
          const shown = moveKept(band, move);
          expect(shown).toEqual({ startSample: startPx * 7, endSample: (startPx + 9) * 7 });
          const parts = partsToPaint(band.whole);
          const columns = parts.reduce((sum, { fromPx, endPx }) => sum + endPx - fromPx, 0);
          const isFirst = band.pixels[0] === 0;
          expect(columns).toBe(isFirst ? 9 : Math.min(9, Math.abs(step)));
          for (const { fromPx, endPx } of parts)
            for (let x = fromPx; x < endPx; x++)
              for (let row = 0; row < 3; row++) band.pixels[row * 9 + x] = (startPx + x) * 3 + row;
          band.whole.fill(1);
          const wanted = Array.from({ length: 27 }, (_, at) => (startPx + (at % 9)) * 3 + Math.floor(at / 9));
          expect([...band.pixels]).toEqual(wanted);
        }
      }),
    );
  });

  it('are painted anew at another scale or with other colours, and where a level stood in', () => {
    const band = keptBand(fakeContext(), 'audible', size);
    const move = { key: 'k', startSample: 80, samplesPerPixel: 2 };
    moveKept(band, move);
    band.whole.fill(1);
    band.whole.fill(0, 3, 5);
    expect(moveKept(band, { ...move, startSample: 82.9 })).toEqual({ startSample: 82, endSample: 98 });
    expect(partsToPaint(band.whole)).toEqual([
      { fromPx: 2, endPx: 4 },
      { fromPx: 7, endPx: 8 },
    ]);
    band.whole.fill(1);
    moveKept(band, { ...move, samplesPerPixel: 3 });
    expect(partsToPaint(band.whole)).toEqual([{ fromPx: 0, endPx: 8 }]);
    band.whole.fill(1);
    moveKept(band, { ...move, samplesPerPixel: 3, key: 'other' });
    expect(partsToPaint(band.whole)).toEqual([{ fromPx: 0, endPx: 8 }]);
  });
});
