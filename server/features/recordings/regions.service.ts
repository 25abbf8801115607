import type { RegionQuery, RegionReport } from '../../../shared/contract/region.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { invalidField } from '../../http/problem.ts';
import { measureRegion } from '../../measuring/measure-region.ts';
import { createGate } from '../../services/gate.ts';
import { requireChannel, type RecordingViewsService } from './recording-views.service.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts {
  recordingViews: RecordingViewsService;
  readStoredAudio: StoredAudioReader;
}

export type RegionsService = ReturnType<typeof createRegionsService>;

const regionsAtOnce = 2;
/** Frames are read with all of their channels. */
const mostReadSamples = 64_000_000;

/** Levels and spectra of spans that somebody chose, on demand. They tell of that span alone, and so are allowed in a blind pass. */
export function createRegionsService({ recordingViews, readStoredAudio }: Parts) {
  const gate = createGate(regionsAtOnce);

  async function measure(actor: Actor, recordingId: string, query: RegionQuery): Promise<RegionReport> {
    const { row } = recordingViews.requireMeasured(actor, recordingId);
    requireChannel(row, query.channel);
    const { frames, channels, sampleRateHz } = row.format;
    if (query.startSample >= frames) throw invalidField('startSample', 'lies after the end of the recording');
    const endSample = Math.min(query.endSample, frames);
    const most = Math.floor(mostReadSamples / channels);
    if (endSample - query.startSample > most)
      throw invalidField(
        'endSample',
        `is too far: at most ${most.toLocaleString('en')} samples of so many channels`,
      );
    return gate(async () => {
      const stored = await readStoredAudio(row);
      return measureRegion({ ...stored, ...query, sampleRateHz, endSample });
    });
  }

  return { measure };
}
