import type { SampleSpan } from '../../shared/domain/event-span.ts';
import { defaultDetectorSettings } from '../signal/detector-settings.ts';
import { onsetInSpan, type SpanOnset } from '../signal/span-onset.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import type { MarkedSpan } from './measure-span.ts';

interface OnsetInput {
  filePath: string;
  header: AudioPlace;
  sampleRateHz: number;
  span: MarkedSpan;
  lowHz: number;
  /** Nothing outside of it is read; the span has to begin in it. */
  within: SampleSpan;
}

/** What the noise is learnt from, whatever the length of the span. */
const LEAST_LEAD_SAMPLES = 512;
const LONGEST_LEAD_SAMPLES = 65_536;
/** A short span is searched for at least so far before its start. */
const LEAST_REACH_SAMPLES = 64;
const MORE_THAN_THE_DETECTOR_DB = 1.5;

/**
 * The onset of the sound in a span, on the samples as they were brought in, searched from one length of the span before it,
 * where `within` reaches that far.
 *
 * @returns place in samples of the recording, or `null` where nothing stands out.
 */
export async function measureOnset(input: OnsetInput): Promise<SpanOnset | null> {
  const { channel, startSample } = input.span;
  const endSample = Math.min(input.span.endSample, input.within.endSample);
  const samples = endSample - startSample;
  const wanted = Math.min(LONGEST_LEAD_SAMPLES, Math.max(LEAST_LEAD_SAMPLES, samples));
  const leadSamples = Math.min(startSample - input.within.startSample, wanted);
  const reader = await BlockReader.open(input.filePath, input.header);
  try {
    const first = startSample - leadSamples;
    const read = await reader.readChannel(channel, first, leadSamples + samples);
    const pick = onsetInSpan(read, {
      leadSamples,
      reachSamples: Math.min(leadSamples, Math.max(LEAST_REACH_SAMPLES, samples)),
      sampleRateHz: input.sampleRateHz,
      lowHz: input.lowHz,
      minimumStepDb: defaultDetectorSettings.onsetGateDb + MORE_THAN_THE_DETECTOR_DB,
    });
    return pick && { ...pick, index: pick.index + first };
  } finally {
    await reader.close();
  }
}
