import { longestOnsetSpanSamples } from '../../../shared/contract/onset.ts';
import type { OnsetAnswer, OnsetQuery } from '../../../shared/contract/onset.ts';
import type { SampleSpan } from '../../../shared/domain/event-span.ts';
import { holdsSample } from '../../../shared/domain/span-set.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { blindWindowsOf } from '../../authorize/withheld.ts';
import type { Ground } from '../../ground.ts';
import { invalidField } from '../../http/problem.ts';
import { measureOnset } from '../../measuring/measure-onset.ts';
import { createGate } from '../../services/gate.ts';
import { requireChannel, type RecordingViewsService } from './recording-views.service.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts extends Pick<Ground, 'db'> {
  recordingViews: RecordingViewsService;
  readStoredAudio: StoredAudioReader;
}

export type OnsetsService = ReturnType<typeof createOnsetsService>;

const onsetsAtOnce = 4;
const leastLeadSamples = 8;

/**
 * Picks the onset in a span that somebody drew. It looks at that span and shortly before it, and so is allowed in a blind
 * pass; where that has windows, it reads no sample outside the one in which the span begins.
 */
export function createOnsetsService({ db, recordingViews, readStoredAudio }: Parts) {
  const gate = createGate(onsetsAtOnce);

  async function pick(actor: Actor, recordingId: string, query: OnsetQuery): Promise<OnsetAnswer> {
    const { row } = recordingViews.requireMeasured(actor, recordingId);
    requireChannel(row, query.channel);
    const { frames, sampleRateHz } = row.format;
    const { channel, startSample, endSample, lowHz = 0 } = query;
    if (endSample > frames) throw invalidField('endSample', 'lies after the end of the recording');
    if (endSample - startSample > longestOnsetSpanSamples)
      return none('The span is too long to have one onset: make it shorter.');
    const windows = blindWindowsOf(db, actor, recordingId);
    const within = partAround(startSample, windows ?? [{ startSample: 0, endSample: frames }]);
    if (!within) return none('The span begins outside the windows of this pass.');
    if (startSample - within.startSample < leastLeadSamples)
      return none(
        `The span begins with the ${windows ? 'window' : 'recording'}: there is no quiet before it to compare with.`,
      );
    const found = await gate(async () => {
      const stored = await readStoredAudio(row);
      const span = { channel, startSample, endSample };
      return measureOnset({ ...stored, sampleRateHz, span, lowHz, within });
    });
    if (!found) return none('Nothing in the span stands out from what is before it.');
    const { index, uncertaintySamples, stepDb } = found;
    return { onsetSample: index, uncertaintySamples, stepDb, reason: null };
  }

  return { pick };
}

function partAround(sample: number, parts: readonly SampleSpan[]): SampleSpan | undefined {
  return parts.find((part) => holdsSample([part], sample));
}

function none(reason: string): OnsetAnswer {
  return { onsetSample: null, uncertaintySamples: null, stepDb: null, reason };
}
