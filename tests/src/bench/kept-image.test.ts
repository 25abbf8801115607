import { describe, expect, it } from 'vitest';
import { keptImage } from '@/components/bench/kept-image.ts';

/** What of a context makes pixels. */
function fakeContext(): CanvasRenderingContext2D {
  const createImageData = (width: number, height: number) => ({ width, height });
  return { createImageData } as unknown as CanvasRenderingContext2D;
}

describe('pixels kept from drawing to drawing', () => {
  const size = { widthPx: 8, heightPx: 4 };

  it('are the same as long as name and size stay', () => {
    const context = fakeContext();
    expect(keptImage(context, 'audible', { ...size })).toBe(keptImage(context, 'audible', size));
  });

  it('are others for another size, another band and another canvas', () => {
    const context = fakeContext();
    const image = keptImage(context, 'audible', size);
    expect(keptImage(context, 'ultrasonic', size)).not.toBe(image);
    expect(keptImage(fakeContext(), 'audible', size)).not.toBe(image);
    const taller = keptImage(context, 'audible', { widthPx: 8, heightPx: 5 });
    expect(taller).not.toBe(image);
    expect(taller).toMatchObject({ width: 8, height: 5 });
  });
});
