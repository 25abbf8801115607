import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { seenStretches } from '@/components/bench/unseen-drawing.ts';
import { yOfFrequency } from '@/composables/bench/frequency-axis.ts';
import { placeStage } from '@/composables/bench/stage-places.ts';

const places = placeStage({ widthPx: 1066, heightPx: 500, split: 0.6, topHz: 400_000 });
const { ultrasonic, audible, waveTopPx, waveHeightPx } = places;
const wave = { topPx: waveTopPx, bottomPx: waveTopPx + waveHeightPx };
const bottomOf = ({ topPx, heightPx }: { topPx: number; heightPx: number }) => topPx + heightPx;

describe('what of the stage shows something', () => {
  it('is both bands and the waveform where nothing is hatched', () => {
    expect(seenStretches(places, [])).toEqual([
      { topPx: ultrasonic.topPx, bottomPx: bottomOf(ultrasonic) },
      { topPx: audible.topPx, bottomPx: bottomOf(audible) },
      wave,
    ]);
  });

  it('leaves out a band of which nothing can be seen, so that its words stay clear', () => {
    const stretches = seenStretches(places, [{ lowHz: 20_000, highHz: 400_000, reason: '' }]);
    expect(stretches).toEqual([{ topPx: audible.topPx, bottomPx: bottomOf(audible) }, wave]);
  });

  it('never covers a frequency that cannot be seen', () => {
    const hz = fc.integer({ min: 0, max: 400_000 });
    fc.assert(
      fc.property(hz, hz, hz, hz, (a, b, c, at) => {
        const [low = 0, middle = 0, high = 0] = [a, b, c].sort((x, y) => x - y);
        const unseen = [
          { lowHz: high, highHz: 400_000, reason: '' },
          { lowHz: low, highHz: middle, reason: '' },
        ];
        const isUnseen = unseen.some(({ lowHz, highHz }) => at > lowHz && at < highHz);
        const y = yOfFrequency(at, at >= 20_000 ? ultrasonic : audible);
        const isCovered = seenStretches(places, unseen).some(
          ({ topPx, bottomPx }) => y > topPx + 1e-6 && y < bottomPx - 1e-6,
        );
        expect(isUnseen && isCovered).toBe(false);
      }),
    );
  });
});
