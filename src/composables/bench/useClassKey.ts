import { computed } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { Confidence } from '@shared/contract/schemes.ts';
import type { SampleSpan } from '@shared/domain/event-span.ts';
import type { BenchData } from '@/composables/bench/load-bench.ts';
import { lessSure } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { classTitle, timeWords } from '@/composables/bench/mark-words.ts';
import type { Circumstances } from '@/composables/bench/marking/useCircumstances.ts';
import { defaultSpan, markByCandidate, markBySpan } from '@/composables/bench/new-mark.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { pixelAtSample } from '@/composables/bench/time-axis.ts';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import type { BenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { OUTSIDE_WORDS } from '@/composables/pass/mark-room.ts';
import type { MarkRoom } from '@/composables/pass/mark-room.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

/** A class key changes the selected mark where the cursor is this near to it; elsewhere it sets a new one. */
const NEAR_PX = 10;

export interface ClassKeyParts extends Pick<BenchData, 'layout' | 'scheme'> {
  canMark: boolean;
  view: BenchWindow;
  marks: BenchMarks;
  draft: Ref<DraftSpan | null>;
  selectedCandidate: Ref<Candidate | null>;
  markSample: Ref<number>;
  channel: Ref<number>;
  plotWidthPx: Ref<number>;
  room: MarkRoom;
  circumstances: Circumstances;
  /** A new mark was set. */
  onSet: (key: string) => void;
}

/** What the one key does: it sets a mark of a class, or changes the one in hand. */
export function useClassKey(parts: ClassKeyParts) {
  const { layout, scheme, canMark, view, marks, draft, selectedCandidate, markSample, plotWidthPx } = parts;
  const { frames, sampleRateHz } = layout;
  const { announce } = useAnnounce();

  function isNear(sample: number, span: SampleSpan): boolean {
    const px = (at: number) => pixelAtSample(at, view.shown.value, plotWidthPx.value);
    return px(sample) >= px(span.startSample) - NEAR_PX && px(sample) <= px(span.endSample) + NEAR_PX;
  }

  /** Several that are in hand are changed together, wherever the cursor is. */
  const several = computed(() => {
    const own = marks.selectedMarks.value.filter(({ isOwn }) => isOwn);
    return own.length > 1 && !draft.value ? own : null;
  });
  const marked = computed(() => {
    const mark = marks.selected.value;
    return mark?.isOwn && !draft.value && isNear(markSample.value, mark) ? mark : null;
  });
  const proposed = computed(() => {
    const candidate = selectedCandidate.value;
    if (!candidate || draft.value || marked.value) return null;
    const span = { startSample: candidate.onsetSample, endSample: candidate.endSample };
    return isNear(markSample.value, span) ? candidate : null;
  });

  /** Where a new mark would begin, near enough. */
  function startOfNew(): number {
    return draft.value?.startSample ?? proposed.value?.onsetSample ?? markSample.value;
  }

  /** What a class key would do now, in words. */
  const intent = computed(() => {
    if (!canMark) return '';
    const at = timeWords(markSample.value, sampleRateHz);
    if (!marked.value && !several.value && parts.room.isOutside(startOfNew())) return OUTSIDE_WORDS;
    if (draft.value) return 'A class key marks the drawn span';
    if (several.value)
      return `A class key changes the ${several.value.length} selected marks; Esc lets them go`;
    if (marked.value)
      return `A class key changes the selected ${classTitle(marked.value.classKey, scheme.classes)}`;
    if (proposed.value) return 'A class key takes the selected candidate';
    return `A class key sets a mark at ${at}`;
  });

  function fieldsFor(classKey: string, isLessSure: boolean): MarkFields {
    const place = { channel: parts.channel.value, frames, sampleRateHz };
    const named = { classKey, confidence: isLessSure ? ('probable' as const) : ('sure' as const) };
    const told = { ...parts.circumstances.placedNow(), aids: parts.circumstances.aidsInUse() };
    if (draft.value) return markBySpan(draft.value, place, named, told);
    if (proposed.value) return markByCandidate(proposed.value, place, named, told);
    const size = { widthPx: plotWidthPx.value, frames, sampleRateHz };
    const span = defaultSpan(markSample.value, view.shown.value, size);
    return markBySpan({ ...span, lowHz: null, highHz: null }, place, named, told);
  }

  /** Shift says: less sure. */
  function chooseClass(classKey: string, isLessSure: boolean): void {
    if (!canMark) return;
    const present = several.value ?? (marked.value ? [marked.value] : null);
    if (present) {
      const keys = present.map(({ key }) => key);
      marks.changeAll(keys, ({ confidence }) => named(classKey, confidence, isLessSure), 'class');
      return;
    }
    const fields = fieldsFor(classKey, isLessSure);
    if (parts.room.isOutside(fields.startSample)) {
      void announce(OUTSIDE_WORDS);
      return;
    }
    draft.value = null;
    selectedCandidate.value = null;
    const key = marks.set(fields);
    if (view.pointerSample.value === null) view.placeCursor(fields.startSample);
    parts.onSet(key);
  }

  return { marked, intent, chooseClass };
}

function named(classKey: string, confidence: Confidence, isLessSure: boolean) {
  return { classKey, confidence: isLessSure ? lessSure(confidence) : ('sure' as const) };
}
