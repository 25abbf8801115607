import type { Ref } from 'vue';
import type { TileLayout } from '@shared/contract/views.ts';
import { timeWords } from '@/composables/bench/mark-words.ts';
import { defaultSpan } from '@/composables/bench/new-mark.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { formatDuration } from '@/composables/useFormat.ts';

export interface DrawnSpanParts {
  layout: Pick<TileLayout, 'frames' | 'sampleRateHz'>;
  view: { shown: Readonly<Ref<TimeWindow>> };
  plotWidthPx: Readonly<Ref<number>>;
  draft: Ref<DraftSpan | null>;
  markSample: Readonly<Ref<number>>;
}

/** A span drawn without a pointer: from where the cursor was to where it is. An edge that passes the other begins anew. */
export function useDrawnSpan({ layout, view, plotWidthPx, draft, markSample }: DrawnSpanParts) {
  const { frames, sampleRateHz } = layout;
  const { announce } = useAnnounce();

  const shortSpan = () =>
    defaultSpan(markSample.value, view.shown.value, { widthPx: plotWidthPx.value, frames, sampleRateHz });

  function draw(span: TimeWindow): void {
    const { lowHz = null, highHz = null } = draft.value ?? {};
    const { startSample, endSample } = span;
    draft.value = { startSample, endSample, lowHz, highHz };
    const length = formatDuration((endSample - startSample) / sampleRateHz, 4);
    void announce(`Span from ${timeWords(startSample, sampleRateHz)}, ${length}`);
  }

  function startHere(): void {
    const { startSample, endSample } = shortSpan();
    const drawn = draft.value;
    draw({ startSample, endSample: drawn && drawn.endSample > startSample ? drawn.endSample : endSample });
  }

  function endHere(): void {
    const at = Math.min(frames, Math.max(1, Math.ceil(markSample.value)));
    const { startSample, endSample } = shortSpan();
    const length = endSample - startSample;
    const drawn = draft.value;
    const isAfter = drawn !== null && drawn.startSample < at;
    draw({ startSample: isAfter ? drawn.startSample : Math.max(0, at - length), endSample: at });
  }

  return { startHere, endHere };
}
