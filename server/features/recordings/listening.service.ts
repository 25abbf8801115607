import { setImmediate as nextTurn } from 'node:timers/promises';
import { longestListenS, type ListenQuery } from '../../../shared/contract/views.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { invalidField } from '../../http/problem.ts';
import { BlockReader } from '../../measuring/block-reader.ts';
import { createGate } from '../../services/gate.ts';
import { planResampling, resample, type ResamplePlan } from '../../signal/resample.ts';
import { fadeEnds, limitPeak } from '../../signal/soft-ends.ts';
import { encodeMonoWav } from './listening-wav.ts';
import { requireChannel, type RecordingViewsService } from './recording-views.service.ts';
import type { RecordingRow } from './recordings.queries.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts {
  recordingViews: RecordingViewsService;
  readStoredAudio: StoredAudioReader;
}

export interface Rendition {
  bytes: Uint8Array;
  /** Names exactly these bytes. */
  etag: string;
}

export type ListeningService = ReturnType<typeof createListeningService>;

const listenRateHz = 48_000;
/** -6 dB re full scale: unmasked clicks must not hurt. */
const loudestPeak = 10 ** (-6 / 20);
const fadeS = 0.005;
const outputPerTurn = 2048;
/** What is read and filtered for one rendition at most; 120 s at 192 kHz. */
const mostInputFrames = 24_000_000;
/** Frames are decoded with all of their channels. */
const mostDecodedSamples = 96_000_000;
const renditionsAtOnce = 2;

/** Slowed renditions for the ear. The stored sound is never changed. */
export function createListeningService({ recordingViews, readStoredAudio }: Parts) {
  const gate = createGate(renditionsAtOnce);

  function listen(actor: Actor, recordingId: string, query: ListenQuery): Promise<Rendition> {
    const { row } = recordingViews.requireMeasured(actor, recordingId);
    requireChannel(row, query.channel);
    const span = { ...query, endSample: Math.min(query.endSample, row.format.frames) };
    requireListenable(row, span);
    return gate(() => render(row, span));
  }

  async function render(row: RecordingRow, span: ListenQuery): Promise<Rendition> {
    const { filePath, header } = await readStoredAudio(row);
    const reader = await BlockReader.open(filePath, header);
    try {
      const samples = await renderSpan(
        reader,
        span,
        planResampling(row.format.sampleRateHz / span.slow / listenRateHz),
      );
      limitPeak(samples, loudestPeak);
      fadeEnds(samples, fadeS * listenRateHz);
      const etag = ['listen', row.sha256, span.channel, span.startSample, span.endSample, span.slow].join(
        '-',
      );
      return { bytes: encodeMonoWav(samples, listenRateHz), etag };
    } finally {
      await reader.close();
    }
  }

  return { listen };
}

/** Block by block, with a turn for everybody else in between. */
async function renderSpan(reader: BlockReader, span: ListenQuery, plan: ResamplePlan): Promise<Float32Array> {
  const frames = span.endSample - span.startSample;
  const samples = new Float32Array(Math.max(1, Math.round(frames / plan.inputPerOutput)));
  for (let outputStart = 0; outputStart < samples.length; outputStart += outputPerTurn) {
    const output = samples.subarray(outputStart, outputStart + outputPerTurn);
    const from = Math.floor(outputStart * plan.inputPerOutput) - plan.reachSamples;
    const to = Math.ceil((outputStart + output.length) * plan.inputPerOutput) + plan.reachSamples;
    const first = Math.max(0, span.startSample + from);
    const end = Math.min(reader.frames, span.startSample + to);
    const input = await reader.readChannel(span.channel, first, end - first);
    resample(plan, { input, inputStart: first - span.startSample, outputStart, output });
    await nextTurn();
  }
  return samples;
}

function requireListenable({ format }: RecordingRow, { startSample, endSample, slow }: ListenQuery): void {
  const frames = endSample - startSample;
  if (frames <= 0) throw invalidField('startSample', 'lies after the end of the recording');
  if ((frames / format.sampleRateHz) * slow > longestListenS) {
    throw invalidField(
      'endSample',
      `is too far: at this speed the stretch would last longer than ${longestListenS} s`,
    );
  }
  const mostFrames = Math.min(mostInputFrames, Math.floor(mostDecodedSamples / format.channels));
  if (frames > mostFrames) {
    throw invalidField(
      'endSample',
      `is too far: at most ${mostFrames.toLocaleString('en')} samples are taken at once`,
    );
  }
}
