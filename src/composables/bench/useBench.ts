import { computed, shallowRef } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { BenchData } from '@/composables/bench/load-bench.ts';
import { lessSure } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { classTitle, timeWords } from '@/composables/bench/mark-words.ts';
import { defaultSpan, markByCandidate, markBySpan } from '@/composables/bench/new-mark.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { pixelAtSample } from '@/composables/bench/time-axis.ts';
import { useBenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { useBenchSources } from '@/composables/bench/useBenchSources.ts';
import { useBenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { useListening } from '@/composables/bench/useListening.ts';
import { clampSpan } from '@shared/domain/event-span.ts';

/** A class key changes the selected mark where the cursor is this near to it; elsewhere it sets a new one. */
const NEAR_PX = 10;

export type Bench = ReturnType<typeof useBench>;

/** The state of one recording on the bench, and what can be done with it. */
export function useBench({ recording, layout, pass, scheme, events }: BenchData) {
  const { frames, sampleRateHz } = layout;
  const draft = shallowRef<DraftSpan | null>(null);
  const selectedCandidate = shallowRef<Candidate | null>(null);
  const canMark = pass?.state === 'assigned' && recording.may.mark;
  const areCandidatesShown = !recording.blind && !(pass?.blind && pass.state === 'assigned');

  const view = useBenchWindow(frames);
  const sources = useBenchSources({
    recordingId: recording.id,
    layout,
    window: view.shown,
    areCandidatesShown,
  });
  const { channel, plotWidthPx } = sources;
  const marks = useBenchMarks({
    recordingId: recording.id,
    sampleRateHz,
    passId: canMark ? pass.id : null,
    scheme,
    events,
  });
  const { container } = recording.format;
  const listening = useListening({ recordingId: recording.id, sampleRateHz, container, channel });

  /** While sound runs and no pointer is over the picture, marks are set where it is heard. */
  const markSample = computed(() => {
    const heard = listening.isPlaying.value ? listening.playheadSample.value : null;
    return view.pointerSample.value ?? heard ?? view.place.value;
  });

  function isNear(sample: number, span: { startSample: number; endSample: number }): boolean {
    const px = (at: number) => pixelAtSample(at, view.shown.value, plotWidthPx.value);
    return px(sample) >= px(span.startSample) - NEAR_PX && px(sample) <= px(span.endSample) + NEAR_PX;
  }

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

  /** What a class key would do now, in words. */
  const intent = computed(() => {
    if (!canMark) return '';
    const at = timeWords(markSample.value, sampleRateHz);
    if (draft.value) return 'A class key marks the drawn span';
    if (marked.value)
      return `A class key changes the selected ${classTitle(marked.value.classKey, scheme.classes)}`;
    if (proposed.value) return 'A class key takes the selected candidate';
    return `A class key sets a mark at ${at}`;
  });

  function fieldsFor(classKey: string, isLessSure: boolean): MarkFields {
    const place = { channel: channel.value, frames, sampleRateHz };
    const named = { classKey, confidence: isLessSure ? ('probable' as const) : ('sure' as const) };
    if (draft.value) return markBySpan(draft.value, place, named);
    if (proposed.value) return markByCandidate(proposed.value, place, named);
    const size = { widthPx: plotWidthPx.value, frames, sampleRateHz };
    const span = defaultSpan(markSample.value, view.shown.value, size);
    return markBySpan({ ...span, lowHz: null, highHz: null }, place, named);
  }

  /** The one key: sets a mark of this class, or changes the one in hand. Shift says: less sure. */
  function chooseClass(classKey: string, isLessSure: boolean): void {
    if (!canMark) return;
    const present = marked.value;
    if (present) {
      const confidence = isLessSure ? lessSure(present.confidence) : 'sure';
      marks.change(present.key, { classKey, confidence }, 'class');
      return;
    }
    const fields = fieldsFor(classKey, isLessSure);
    draft.value = null;
    selectedCandidate.value = null;
    marks.set(fields);
    if (view.pointerSample.value === null) view.placeCursor(fields.startSample);
  }

  function selectMark(key: string | null): void {
    selectedCandidate.value = null;
    marks.selectedKey.value = key;
    const mark = marks.selected.value;
    if (!mark) return;
    view.bringIntoView(mark);
    view.placeCursor(mark.startSample);
  }

  function selectCandidate(candidate: Candidate | null): void {
    marks.selectedKey.value = null;
    selectedCandidate.value = candidate;
    if (!candidate) return;
    view.bringIntoView({ startSample: candidate.onsetSample, endSample: candidate.endSample });
    view.placeCursor(candidate.onsetSample);
  }

  function moveEdge(edge: 'start' | 'end', sample: number): void {
    const mark = marks.selected.value;
    if (!mark) return;
    const moved =
      edge === 'start'
        ? { startSample: Math.min(sample, mark.endSample - 1), endSample: mark.endSample }
        : { startSample: mark.startSample, endSample: Math.max(sample, mark.startSample + 1) };
    marks.change(mark.key, clampSpan(moved, frames), edge);
  }

  function dropAll(): void {
    draft.value = null;
    selectedCandidate.value = null;
    marks.selectedKey.value = null;
    listening.stop();
  }

  return {
    recording,
    layout,
    pass,
    scheme,
    ...sources,
    draft,
    canMark,
    areCandidatesShown,
    view,
    selectedCandidate,
    marks,
    marked,
    listening,
    markSample,
    intent,
    chooseClass,
    selectMark,
    selectCandidate,
    moveEdge,
    dropAll,
  };
}
