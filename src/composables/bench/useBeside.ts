import { useLocalStorage } from '@vueuse/core';
import { computed } from 'vue';
import type { Ref } from 'vue';
import { useRouter } from 'vue-router';
import type { Recording } from '@shared/contract/recordings.ts';
import {
  isRecordedAt,
  runPieces,
  runTimeNsAt,
  sampleAtRunTime,
  spanOfAll,
  type RunSpan,
} from '@shared/domain/run-time.ts';
import type { BenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { stripSpan } from '@/composables/runs/run-axis.ts';
import { usePhaseMarking } from '@/composables/runs/usePhaseMarking.ts';
import { useRunPhases } from '@/composables/runs/useRunPhases.ts';
import { useRunTimeline } from '@/composables/runs/useRunTimeline.ts';
import { useRunVideos } from '@/composables/runs/useRunVideos.ts';
import { useStripTraces } from '@/composables/runs/useStripTraces.ts';

export interface BesideOptions {
  recording: Recording;
  view: BenchWindow;
  /** Where a mark would be set now. */
  markSample: Readonly<Ref<number>>;
}

/** Where the film stands on the bench. */
export type FilmPlace = 'beside' | 'under' | 'closed';
export type Beside = ReturnType<typeof useBeside>;

/** What lies beside the sound of the recording at hand, on the clock of its run. */
export function useBeside({ recording, view, markSample }: BesideOptions) {
  const router = useRouter();
  const timeline = useRunTimeline(recording.runId);
  const phases = useRunPhases(recording.runId);
  const marking = usePhaseMarking(phases);
  const { traces, proposals } = useStripTraces(recording.runId);
  const videos = useRunVideos(recording.runId);
  const filmPlace = useLocalStorage<FilmPlace>('recalesce.bench.film', 'closed');

  const own = computed(() => timeline.recordings.value.find(({ id }) => id === recording.id) ?? null);
  /** Until the server has told the place: as the recording itself declares it. */
  const declared = runPieces({ ...recording, clockPpm: 0 }, recording.frames);
  const pieces = computed(() => own.value?.pieces ?? declared);
  const isPlaceKnown = recording.runOffsetNs !== null;
  const laid = computed(() => {
    const others = timeline.recordings.value;
    return others.length > 0 ? others : [{ ...recording, isPlaceKnown, pieces: declared, course: null }];
  });
  const span = computed(() => stripSpan(laid.value, phases.items.value));
  const toRunNs = (sample: number) => runTimeNsAt(pieces.value, sample);
  const window = computed<RunSpan>(() => ({
    startNs: toRunNs(view.shown.value.startSample),
    endNs: toRunNs(view.shown.value.endSample),
  }));

  /** Where this recording has nothing but another one has, a single press opens that one there. */
  function goTo(ns: number, isHeld: boolean): void {
    const there = isRecordedAt(pieces.value, ns)
      ? undefined
      : timeline.recordings.value.find((one) => isRecordedAt(one.pieces, ns));
    if (there === undefined) return view.centre(sampleAtRunTime(pieces.value, ns));
    if (!isHeld)
      void router.push(addressAt(there, ns, view.shown.value.endSample - view.shown.value.startSample));
  }

  function showSpan(part: RunSpan): void {
    const startSample = sampleAtRunTime(pieces.value, part.startNs);
    const endSample = sampleAtRunTime(pieces.value, part.endNs);
    if (endSample > startSample) view.bringIntoView({ startSample, endSample });
  }

  function selectPhase(id: string | null): void {
    marking.select(id);
    if (marking.selected.value) showSpan(marking.selected.value);
  }

  return {
    timeline,
    phases,
    marking,
    traces,
    proposals,
    videos,
    filmPlace,
    laid,
    span,
    window,
    pieces,
    isPlaceKnown,
    ownSpan: computed(() => spanOfAll(pieces.value)),
    cursorNs: computed(() => toRunNs(markSample.value)),
    toRunNs,
    goTo,
    selectPhase,
  };
}

interface Opened {
  id: string;
  frames: number;
  pieces: Parameters<typeof sampleAtRunTime>[0];
}

/** The bench of a recording around a time of the run, with a window of so many samples. */
export function addressAt({ id, frames, pieces }: Opened, ns: number, samples: number) {
  const middle = sampleAtRunTime(pieces, ns);
  const from = Math.max(0, Math.round(middle - samples / 2));
  const to = Math.min(frames, Math.round(middle + samples / 2));
  return { path: `/bench/${id}`, query: { from: String(from), to: String(Math.max(from + 1, to)) } };
}
