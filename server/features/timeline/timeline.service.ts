import type { Recording } from '../../../shared/contract/recordings.ts';
import type { Counted, RunTimeline, TimelineRecording } from '../../../shared/contract/timeline.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { EventsService } from '../events/events.service.ts';
import type { PhasesService } from '../phases/phases.service.ts';
import type { RecordingsService } from '../recordings/recordings.service.ts';
import { countOnsets, toTimelineRecording } from './timeline.map.ts';

interface Parts {
  recordings: Pick<RecordingsService, 'list' | 'get' | 'requireVisible' | 'listSegments'>;
  events: Pick<EventsService, 'list'>;
  phases: Pick<PhasesService, 'whatIsHeldBack'>;
}

/** A strip shows no more than these. */
const mostRecordings = 100;

export type TimelineService = ReturnType<typeof createTimelineService>;

/** Everything of a run that was recorded, on its clock. */
export function createTimelineService({ recordings, events, phases }: Parts) {
  function get(actor: Actor, runId: string, counted: Counted): RunTimeline {
    const { isBlind, isSoundless } = phases.whatIsHeldBack(actor, runId);
    const page = recordings.list(actor, { runId, limit: mostRecordings });
    const lay = ({ id }: { id: string }) =>
      layOne(actor, id, { counted: isBlind ? null : counted, isSoundless });
    return {
      runId,
      counted: isBlind ? null : counted,
      recordings: page.items.map(lay).sort((a, b) => startOf(a) - startOf(b)),
      leftOut: page.total.count - page.items.length,
    };
  }

  interface Shown {
    counted: Counted | null;
    isSoundless: boolean;
  }

  function layOne(actor: Actor, id: string, { counted, isSoundless }: Shown): TimelineRecording {
    const recording = recordings.get(actor, id);
    const { clockPpm } = recordings.requireVisible(actor, id).row;
    const segments = recording.captures === null ? [] : recordings.listSegments(actor, id).items;
    const course = isSoundless ? null : courseOf(actor, recording, counted);
    return toTimelineRecording({ ...recording, clockPpm, segments }, course);
  }

  function courseOf(
    actor: Actor,
    { id, measurement }: Recording,
    counted: Counted | null,
  ): TimelineRecording['course'] {
    if (measurement === null) return null;
    const { samplesPerStep, levelDb, candidates } = measurement.course;
    if (counted === null) return { samplesPerStep, levelDb, counts: null };
    if (counted === 'candidates') return { samplesPerStep, levelDb, counts: candidates };
    const onsets = events.list(actor, id, undefined).map(({ startSample }) => startSample);
    return { samplesPerStep, levelDb, counts: countOnsets(onsets, measurement.course) };
  }

  return { get };
}

function startOf({ pieces }: TimelineRecording): number {
  return Math.min(...pieces.map(({ startNs }) => startNs));
}
