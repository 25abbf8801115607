import { describe, expect, it } from 'vitest';
import { ref, shallowRef } from 'vue';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { useDrawnSpan } from '@/composables/bench/useDrawnSpan.ts';

const frames = 100_000;

function drawing(drawn: DraftSpan | null = null) {
  const draft = shallowRef(drawn);
  const markSample = ref(0);
  const view = { shown: shallowRef({ startSample: 0, endSample: 10_000 }) };
  const layout = { frames, sampleRateHz: 100_000 };
  const span = useDrawnSpan({ layout, view, plotWidthPx: ref(1000), draft, markSample });
  return { ...span, draft, markSample };
}

describe('a span drawn by keys', () => {
  it('reaches from one place of the cursor to another, in either order', () => {
    const { startHere, endHere, draft, markSample } = drawing();
    markSample.value = 2000.4;
    startHere();
    expect(draft.value).toEqual({ startSample: 2000, endSample: 2080, lowHz: null, highHz: null });
    markSample.value = 5000.4;
    endHere();
    expect(draft.value).toMatchObject({ startSample: 2000, endSample: 5001 });
    markSample.value = 1000;
    startHere();
    expect(draft.value).toMatchObject({ startSample: 1000, endSample: 5001 });
  });

  it('begins anew where one edge passes the other, and keeps the frequencies that were drawn', () => {
    const { startHere, endHere, draft, markSample } = drawing({
      ...{ startSample: 2000, endSample: 3000, lowHz: 1000, highHz: 9000 },
    });
    markSample.value = 4000;
    startHere();
    expect(draft.value).toEqual({ startSample: 4000, endSample: 4080, lowHz: 1000, highHz: 9000 });
    markSample.value = 3000;
    endHere();
    expect(draft.value).toMatchObject({ startSample: 2920, endSample: 3000 });
  });

  it('stays in the recording and is never empty', () => {
    const { startHere, endHere, draft, markSample } = drawing();
    endHere();
    expect(draft.value).toMatchObject({ startSample: 0, endSample: 1 });
    markSample.value = frames - 1;
    startHere();
    expect(draft.value).toMatchObject({ startSample: frames - 1, endSample: frames });
    endHere();
    expect(draft.value).toMatchObject({ startSample: frames - 2, endSample: frames - 1 });
  });
});
