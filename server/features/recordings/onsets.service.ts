import { longestOnsetSpanSamples } from '../../../shared/contract/onset.ts';
import type { OnsetAnswer, OnsetQuery } from '../../../shared/contract/onset.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { invalidField } from '../../http/problem.ts';
import { measureOnset } from '../../measuring/measure-onset.ts';
import { createGate } from '../../services/gate.ts';
import { requireChannel, type RecordingViewsService } from './recording-views.service.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts {
  recordingViews: RecordingViewsService;
  readStoredAudio: StoredAudioReader;
}

export type OnsetsService = ReturnType<typeof createOnsetsService>;

const onsetsAtOnce = 4;
const leastLeadSamples = 8;

/** Picks the onset in a span that somebody drew. It looks at that span alone, and so is allowed in a blind pass. */
export function createOnsetsService({ recordingViews, readStoredAudio }: Parts) {
  const gate = createGate(onsetsAtOnce);

  async function pick(actor: Actor, recordingId: string, query: OnsetQuery): Promise<OnsetAnswer> {
    const { row } = recordingViews.requireMeasured(actor, recordingId);
    requireChannel(row, query.channel);
    const { frames, sampleRateHz } = row.format;
    const { channel, startSample, endSample, lowHz = 0 } = query;
    if (endSample > frames) throw invalidField('endSample', 'lies after the end of the recording');
    if (endSample - startSample > longestOnsetSpanSamples)
      return none('The span is too long to have one onset: make it shorter.');
    if (startSample < leastLeadSamples)
      return none('The span begins with the recording: there is no quiet before it to compare with.');
    const found = await gate(async () => {
      const stored = await readStoredAudio(row);
      return measureOnset({ ...stored, sampleRateHz, span: { channel, startSample, endSample }, lowHz });
    });
    if (!found) return none('Nothing in the span stands out from what is before it.');
    const { index, uncertaintySamples, stepDb } = found;
    return { onsetSample: index, uncertaintySamples, stepDb, reason: null };
  }

  return { pick };
}

function none(reason: string): OnsetAnswer {
  return { onsetSample: null, uncertaintySamples: null, stepDb: null, reason };
}
