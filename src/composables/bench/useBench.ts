import { computed, shallowRef } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import { clampSpan } from '@shared/domain/event-span.ts';
import type { BenchData } from '@/composables/bench/load-bench.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { useBeside } from '@/composables/bench/useBeside.ts';
import { useBenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { useBenchSources } from '@/composables/bench/useBenchSources.ts';
import { useBenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { useClassKey } from '@/composables/bench/useClassKey.ts';
import { useRegion } from '@/composables/bench/useRegion.ts';
import { useListening } from '@/composables/bench/useListening.ts';
import { useCoverage } from '@/composables/pass/useCoverage.ts';

export type Bench = ReturnType<typeof useBench>;

/** The state of one recording on the bench, and what can be done with it: made of parts that know little of each other. */
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
  const passId = canMark ? pass.id : null;
  const place = { recordingId: recording.id, title: recording.runTitle, sampleRateHz };
  const marks = useBenchMarks({ ...place, passId, scheme, events });
  const { container } = recording.format;
  const listening = useListening({ recordingId: recording.id, sampleRateHz, container, channel });

  /** While sound runs and no pointer is over the picture, marks are set where it is heard. */
  const markSample = computed(() => {
    const heard = listening.isPlaying.value ? listening.playheadSample.value : null;
    return view.pointerSample.value ?? heard ?? view.place.value;
  });
  const beside = useBeside({ recording, view, markSample });
  const hand = { view, marks, draft, selectedCandidate, markSample };
  const { channels, tiles } = sources;
  const looked = { view, channels, plotWidthPx, isDrawn: tiles.isWhole };
  const coverage = useCoverage({ pass, canMark, layout, listening, ...looked });
  const { isOutside } = coverage;
  const classKey = useClassKey({ isOutside, layout, scheme, canMark, ...hand, channel, plotWidthPx });

  const region = useRegion({ recordingId: recording.id, layout, channel, ...hand });

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
    beside.marking.drop();
    listening.stop();
  }

  return {
    recording,
    layout,
    pass,
    scheme,
    ...sources,
    ...hand,
    canMark,
    areCandidatesShown,
    listening,
    region,
    beside,
    coverage,
    ...classKey,
    selectMark,
    selectCandidate,
    moveEdge,
    dropAll,
  };
}
