import { computed, shallowRef } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { BenchData } from '@/composables/bench/load-bench.ts';
import { useCircumstances } from '@/composables/bench/marking/useCircumstances.ts';
import { useMarkHand } from '@/composables/bench/marking/useMarkHand.ts';
import { useOnsetSnap } from '@/composables/bench/marking/useOnsetSnap.ts';
import type { DraftSpan } from '@/composables/bench/new-mark.ts';
import { useBeside } from '@/composables/bench/useBeside.ts';
import { useBenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { useBenchSources } from '@/composables/bench/useBenchSources.ts';
import { useBenchWindow } from '@/composables/bench/useBenchWindow.ts';
import { useClassKey } from '@/composables/bench/useClassKey.ts';
import { useDrawnSpan } from '@/composables/bench/useDrawnSpan.ts';
import { useRegion } from '@/composables/bench/useRegion.ts';
import { useInHand } from '@/composables/bench/useInHand.ts';
import { useListening } from '@/composables/bench/useListening.ts';
import { useSelection } from '@/composables/bench/useSelection.ts';
import { markRoom } from '@/composables/pass/mark-room.ts';
import { useCoverage } from '@/composables/pass/useCoverage.ts';

export type Bench = ReturnType<typeof useBench>;

/** The state of one recording on the bench, and what can be done with it: made of parts that know little of each other. */
export function useBench({ recording, layout, firstTiles, pass, scheme, events }: BenchData) {
  const { frames, sampleRateHz } = layout;
  const draft = shallowRef<DraftSpan | null>(null);
  const selectedCandidate = shallowRef<Candidate | null>(null);
  const canMark = pass?.state === 'assigned' && recording.may.mark;
  const areCandidatesShown = !recording.blind && !(pass?.blind && pass.state === 'assigned');

  const view = useBenchWindow(frames);
  const sources = useBenchSources({
    recordingId: recording.id,
    layout,
    firstTiles,
    window: view.shown,
    areCandidatesShown,
  });
  const { channel, plotWidthPx } = sources;
  const passId = canMark ? pass.id : null;
  const named = { recordingId: recording.id, title: recording.runTitle, sampleRateHz };
  const room = markRoom(pass?.windows ?? null, frames);
  const marks = useBenchMarks({ ...named, passId, scheme, events, room });
  const { container } = recording.format;
  const sound = { sampleRateHz, channels: layout.channels, container, channel };
  const listening = useListening({ recordingId: recording.id, ...sound });

  /** While sound runs and no pointer is over the picture, marks are set where it is heard. */
  const markSample = computed(() => {
    const heard = listening.isPlaying.value ? listening.playheadSample.value : null;
    return view.pointerSample.value ?? heard ?? view.place.value;
  });
  const inHand = useInHand({ shown: view.shown, draft, selectedCandidate, markSample, marks });
  const beside = useBeside({ recording, view, markSample });
  const { channels, tiles } = sources;
  const looked = { view, channels, plotWidthPx, isDrawn: tiles.isWhole };
  const coverage = useCoverage({ pass, canMark, layout, listening, ...looked });
  const circumstances = useCircumstances({
    window: view.shown,
    widthPx: plotWidthPx,
    areCandidatesShown,
    aidsInUse: () => listening.aidsInUse(inHand.span.value),
  });
  const snapping = useOnsetSnap({ recordingId: recording.id, marks, room });
  const place = { view, marks, markSample, plotWidthPx, circumstances, room };
  const hand = useMarkHand({ frames, sampleRateHz, channel, ...place });
  const taken = { draft, selectedCandidate, channel };
  const onSet = (key: string) => void snapping.snapFresh(key);
  const classKey = useClassKey({ layout, scheme, canMark, ...place, ...taken, onSet });
  const drawn = useDrawnSpan({ layout, draft, ...place });
  const region = useRegion({ recordingId: recording.id, layout, ...place, ...taken });

  function letGo(): void {
    beside.marking.drop();
    listening.stop();
  }
  const selection = useSelection({ view, marks, draft, selectedCandidate, onDrop: letGo });

  return {
    recording,
    layout,
    pass,
    scheme,
    ...sources,
    ...place,
    draft,
    drawn,
    selectedCandidate,
    canMark,
    areCandidatesShown,
    listening,
    region,
    beside,
    coverage,
    peakFrequencyHz: inHand.peakFrequencyHz,
    ...classKey,
    hand,
    snapping,
    ...selection,
    moveEdge: hand.moveEdge,
  };
}
