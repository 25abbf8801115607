import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import type { SampleSpan } from '../../../shared/domain/event-span.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Tx } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { measureMarkedSpan } from '../../measuring/measure-span.ts';
import type { GuardService } from './guard.service.ts';
import { contextOf } from './measuring.service.ts';
import { selectMeasuredWith } from './recordings.queries.ts';
import { requireSound, type RecordingsService } from './recordings.service.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts extends Pick<Ground, 'db'> {
  recordings: RecordingsService;
  guard: GuardService;
  readStoredAudio: StoredAudioReader;
}

export type MarkingService = ReturnType<typeof createMarkingService>;

/** What setting a mark asks of a recording: its limits, the figures of a span, and the hold that a voice brings. */
export function createMarkingService({ db, recordings, guard, readStoredAudio }: Parts) {
  function requireFacts(actor: Actor, recordingId: string) {
    const { frames, channels, sampleRateHz } = requireSound(recordings.requireVisible(actor, recordingId)).row
      .format;
    return { frames, channels, sampleRateHz };
  }

  async function measureSpan(
    recordingId: string,
    { channel, startSample, endSample }: SampleSpan & { channel: number },
  ): Promise<BurstParameters | null> {
    const view = selectMeasuredWith(db, recordingId);
    if (!view) throw notFound('This recording');
    const { filePath, header } = await readStoredAudio(view.recording);
    const { sampleRateHz } = view.recording.format;
    const span = { channel, startSample, endSample };
    return measureMarkedSpan({ filePath, header, sampleRateHz, context: contextOf(view), span });
  }

  function holdForVoice(tx: Tx, recordingId: string, span: SampleSpan): void {
    guard.hold(tx, recordingId, {
      kind: 'voice-marked',
      sentence: 'Somebody who marked this recording heard a voice.',
      place: `samples ${span.startSample} to ${span.endSample}`,
    });
  }

  return { requireFacts, measureSpan, holdForVoice, announce: guard.announce };
}
