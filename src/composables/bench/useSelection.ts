import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import type { useBenchWindow } from '@/composables/bench/useBenchWindow.ts';

export interface SelectionParts {
  view: ReturnType<typeof useBenchWindow>;
  marks: BenchMarks;
  draft: Ref<DraftSpan | null>;
  selectedCandidate: Ref<Candidate | null>;
  /** Lets go of what else is held. */
  onDrop: () => void;
}

/** One thing is in hand at a time: a mark, a candidate, or a drawn span. */
export function useSelection({ view, marks, draft, selectedCandidate, onDrop }: SelectionParts) {
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

  function dropAll(): void {
    draft.value = null;
    selectedCandidate.value = null;
    marks.selectedKey.value = null;
    onDrop();
  }

  return { selectMark, selectCandidate, dropAll };
}
