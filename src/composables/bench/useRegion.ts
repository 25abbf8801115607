import { watchDebounced } from '@vueuse/core';
import { computed, onScopeDispose, ref, shallowRef } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import { longestRegionSamples } from '@shared/contract/region.ts';
import type { RegionReport } from '@shared/contract/region.ts';
import type { TileLayout } from '@shared/contract/views.ts';
import { getRegion } from '@/api/views.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface RegionOptions {
  recordingId: string;
  layout: TileLayout;
  channel: Ref<number>;
  draft: Ref<DraftSpan | null>;
  marks: { selected: Ref<BenchMark | null | undefined> };
  selectedCandidate: Ref<Candidate | null>;
  view: { shown: Ref<TimeWindow> };
}

/** What is measured, in words for the head of the panel. */
export interface RegionSubject {
  title: string;
  channel: number;
  startSample: number;
  endSample: number;
}

const SETTLE_MS = 250;

/** Spectrum and levels of what is in hand: the drawn span, else the selected mark or candidate, else what is shown. */
export function useRegion(options: RegionOptions) {
  const { recordingId, layout, channel, draft, marks, selectedCandidate, view } = options;
  const isOpen = ref(false);
  const isBusy = ref(false);
  const report = shallowRef<RegionReport | null>(null);
  const error = shallowRef<unknown>(null);
  let underway: AbortController | null = null;

  const subject = computed<RegionSubject>(() => {
    const place = { channel: channel.value };
    if (draft.value) return { title: 'The drawn span', ...place, ...spanOf(draft.value) };
    const mark = marks.selected.value;
    if (mark) return { title: 'The selected mark', channel: mark.channel, ...spanOf(mark) };
    const candidate = selectedCandidate.value;
    if (candidate) {
      const span = { startSample: candidate.onsetSample, endSample: candidate.endSample };
      return { title: 'The selected candidate', ...place, ...spanOf(span) };
    }
    return { title: 'What is shown', ...place, ...spanOf(view.shown.value) };
  });
  const isTooLong = computed(
    () => subject.value.endSample - subject.value.startSample > longestRegionSamples,
  );

  function spanOf({ startSample, endSample }: TimeWindow): TimeWindow {
    const start = Math.max(0, Math.floor(startSample));
    return {
      startSample: start,
      endSample: Math.min(layout.frames, Math.max(start + 1, Math.ceil(endSample))),
    };
  }

  async function measure(): Promise<void> {
    underway?.abort();
    if (!isOpen.value || isTooLong.value) return;
    underway = new AbortController();
    const { signal } = underway;
    const { title: _title, ...span } = subject.value;
    isBusy.value = true;
    try {
      report.value = await getRegion(recordingId, span, signal);
      error.value = null;
    } catch (problem) {
      if (!signal.aborted) error.value = problem;
    }
    if (!signal.aborted) isBusy.value = false;
  }

  function toggle(): void {
    isOpen.value = !isOpen.value;
    if (isOpen.value) void measure();
  }

  watchDebounced(subject, () => void measure(), { debounce: SETTLE_MS });
  onScopeDispose(() => underway?.abort());

  return { isOpen, isBusy, subject, isTooLong, report, error, toggle, measure };
}

export type BenchRegionState = ReturnType<typeof useRegion>;
