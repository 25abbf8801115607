import {
  highestCarrierShare,
  longestListenS,
  mostListenFrames,
  type ListenQuery,
  type QuietSpan,
} from '../../../shared/contract/listening.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { invalidField } from '../../http/problem.ts';
import { BlockReader } from '../../measuring/block-reader.ts';
import { createGate } from '../../services/gate.ts';
import { gateFrameSize } from '../../signal/noise-profile.ts';
import { findQuietSpan, type QuietSpan as Span } from '../../signal/quiet-span.ts';
import { fadeEnds, limitPeak } from '../../signal/soft-ends.ts';
import { encodeMonoWav } from './listening-wav.ts';
import { leastNoiseSamples, readNoiseProfile } from './noise-profiles.ts';
import {
  requireChannel,
  type MeasuredAccess,
  type RecordingViewsService,
} from './recording-views.service.ts';
import type { RecordingRow } from './recordings.queries.ts';
import { renderPlain, renderShifted } from './rendition-render.ts';
import { gatedSource, plainSource, type SampleSource } from './sample-source.ts';
import type { StoredAudioReader } from './stored-audio.ts';

interface Parts {
  recordingViews: RecordingViewsService;
  readStoredAudio: StoredAudioReader;
}

export interface Rendition {
  /** Names exactly the bytes that `make` makes. */
  etag: string;
  make: () => Promise<Uint8Array>;
}

export type ListeningService = ReturnType<typeof createListeningService>;

const listenRateHz = 48_000;
/** -6 dB re full scale: unmasked clicks must not hurt. */
const loudestPeak = 10 ** (-6 / 20);
const fadeS = 0.005;
/** Frames are decoded with all of their channels. */
const mostDecodedSamples = 96_000_000;
const renditionsAtOnce = 2;
/** Bytes of a rendition change with this. */
const renditionVersion = 2;
/** Of the steps in which quiet is looked for, and of what is looked for. */
const quietStepS = 0.01;
const quietSpanS = 1;
const mostQuietSteps = 200_000;
const mostQuietKept = 500;

/** Renditions for the ear: slowed, shifted, freed of noise. The stored sound is never changed. */
export function createListeningService({ recordingViews, readStoredAudio }: Parts) {
  const gate = createGate(renditionsAtOnce);
  const quietSpans = new Map<string, Promise<Span | null>>();

  async function quietSpan(actor: Actor, recordingId: string, channel: number): Promise<QuietSpan> {
    const access = recordingViews.requireMeasured(actor, recordingId);
    requireChannel(access.row, channel);
    return { channel, span: await quietSpanOf(actor, access, channel) };
  }

  /** Looked for once for each measurement, in the peaks that it made. */
  function quietSpanOf(actor: Actor, access: MeasuredAccess, channel: number): Promise<Span | null> {
    const key = `${access.measurementId}-${channel}`;
    const known = quietSpans.get(key);
    if (known) return known;
    const [oldest] = quietSpans.keys();
    if (quietSpans.size >= mostQuietKept && oldest !== undefined) quietSpans.delete(oldest);
    const finding = findQuiet(actor, access.row, channel);
    quietSpans.set(key, finding);
    finding.catch(() => quietSpans.delete(key));
    return finding;
  }

  async function findQuiet(actor: Actor, row: RecordingRow, channel: number): Promise<Span | null> {
    const { frames, sampleRateHz } = row.format;
    const points = Math.min(mostQuietSteps, Math.max(1, Math.ceil(frames / sampleRateHz / quietStepS)));
    const peaks = await recordingViews.peaks(actor, row.id, { channel, startSample: 0, points });
    const span = findQuietSpan(peaks, quietSpanS * sampleRateHz);
    return span && { ...span, endSample: Math.min(span.endSample, frames) };
  }

  async function listen(actor: Actor, recordingId: string, query: ListenQuery): Promise<Rendition> {
    const access = recordingViews.requireMeasured(actor, recordingId);
    const { row } = access;
    requireChannel(row, query.channel);
    const span = { ...query, endSample: Math.min(query.endSample, row.format.frames) };
    requireListenable(row, span);
    const noise = await noiseSpan(actor, access, span);
    const { channel, startSample, endSample, slow, shiftHz = 0 } = span;
    const gated = noise ? `${noise.startSample}-${noise.endSample}` : 'open';
    const named = [renditionVersion, row.sha256, channel, startSample, endSample, slow, shiftHz, gated];
    return { etag: `listen-${named.join('-')}`, make: () => gate(() => render(row, span, noise)) };
  }

  async function noiseSpan(actor: Actor, access: MeasuredAccess, query: ListenQuery): Promise<Span | null> {
    if (query.gate === undefined) return null;
    const { frames, sampleRateHz } = access.row.format;
    const { gateStartSample = 0, gateEndSample = 0 } = query;
    const span =
      query.gate === 'machine'
        ? await quietSpanOf(actor, access, query.channel)
        : { startSample: gateStartSample, endSample: Math.min(gateEndSample, frames) };
    if (!span) throw invalidField('gate', 'has no noise to go by: this channel is silent throughout');
    const least = leastNoiseSamples(gateFrameSize(sampleRateHz, query.slow));
    if (span.endSample - span.startSample < least) {
      const leastMs = Math.ceil((least / sampleRateHz) * 1000).toLocaleString('en');
      const field = query.gate === 'machine' ? 'gate' : 'gateEndSample';
      throw invalidField(
        field,
        `leaves too little: a noise profile needs at least ${leastMs} ms at this speed`,
      );
    }
    return span;
  }

  async function render(row: RecordingRow, query: ListenQuery, noise: Span | null): Promise<Uint8Array> {
    const { filePath, header } = await readStoredAudio(row);
    const reader = await BlockReader.open(filePath, header);
    try {
      const samples = await renderFrom(await sourceFor(reader, query, { row, noise }), row, query);
      limitPeak(samples, loudestPeak);
      fadeEnds(samples, fadeS * listenRateHz);
      return encodeMonoWav(samples, listenRateHz);
    } finally {
      await reader.close();
    }
  }

  return { listen, quietSpan };
}

async function sourceFor(
  reader: BlockReader,
  query: ListenQuery,
  { row, noise }: { row: RecordingRow; noise: Span | null },
): Promise<SampleSource> {
  const plain = plainSource(reader, query.channel);
  if (!noise) return plain;
  const size = gateFrameSize(row.format.sampleRateHz, query.slow);
  const profile = await readNoiseProfile(reader, { channel: query.channel, span: noise, size });
  return gatedSource(plain, profile, { firstSample: query.startSample, frames: reader.frames });
}

function renderFrom(
  source: SampleSource,
  { format }: RecordingRow,
  query: ListenQuery,
): Promise<Float32Array> {
  const { startSample, endSample, slow, shiftHz } = query;
  const inputPerOutput = format.sampleRateHz / slow / listenRateHz;
  const span = { startSample, endSample, frames: format.frames, inputPerOutput };
  if (shiftHz === undefined) return renderPlain(source, span);
  return renderShifted(source, span, shiftHz / format.sampleRateHz);
}

function requireListenable({ format }: RecordingRow, query: ListenQuery): void {
  const { startSample, endSample, slow, shiftHz = 0 } = query;
  const frames = endSample - startSample;
  if (frames <= 0) throw invalidField('startSample', 'lies after the end of the recording');
  if ((frames / format.sampleRateHz) * slow > longestListenS) {
    throw invalidField(
      'endSample',
      `is too far: at this speed the stretch would last longer than ${longestListenS} s`,
    );
  }
  const mostFrames = Math.min(mostListenFrames, Math.floor(mostDecodedSamples / format.channels));
  if (frames > mostFrames) {
    throw invalidField(
      'endSample',
      `is too far: at most ${mostFrames.toLocaleString('en')} samples are taken at once`,
    );
  }
  const highestHz = highestCarrierShare * format.sampleRateHz;
  if (shiftHz > highestHz) {
    throw invalidField(
      'shiftHz',
      `is too high: at this sample rate a carrier of at most ${Math.floor(highestHz).toLocaleString('en')} Hz leaves something to hear above it`,
    );
  }
}
