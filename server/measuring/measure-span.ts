import type { BurstParameters } from '../../shared/contract/measurement.ts';
import { measureSpan } from '../signal/bursts.ts';
import { robustSigma } from '../signal/noise-floor.ts';
import { packageEngine } from '../signal/package-engine.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import { SMALL_RECORDING_BYTES } from './small-recording.ts';
import type { MeasureContext } from './measure-context.ts';

export interface MarkedSpan {
  channel: number;
  startSample: number;
  endSample: number;
}

interface SpanInput {
  filePath: string;
  header: AudioPlace;
  /** The true rate: a declared time expansion is applied already. */
  sampleRateHz: number;
  context: Omit<MeasureContext, 'timeExpansion'>;
  span: MarkedSpan;
}

/** A longer span is a stretch of sound, not a burst: its parameters would say nothing and cost much. */
const LONGEST_SPAN_SAMPLES = 4_000_000;
/** Length of the quiet before the mark from which noise and threshold are taken. */
const LEAD_S = 0.01;
const LEAST_LEAD_SAMPLES = 64;
/** Of Gaussian noise one sample in 31,574 passes 4 sigma. */
const THRESHOLD_SIGMAS = 4;
const LEAST_THRESHOLD_FS = 2 ** -23;
const HIGHEST_OF_RATE = 0.45;

/**
 * Burst parameters of the untouched samples inside a span that a person marked. Noise and threshold come from the 10 ms
 * before it, or after it where it begins with the recording.
 *
 * @returns `null` for a span of more than 4 million samples.
 */
export async function measureMarkedSpan(input: SpanInput): Promise<BurstParameters | null> {
  const { span, sampleRateHz, context } = input;
  if (span.endSample - span.startSample > LONGEST_SPAN_SAMPLES) return null;
  // A mark and the quiet before it are short: more room would be cleared in vain for each.
  const reader = await BlockReader.open(input.filePath, input.header, packageEngine(), SMALL_RECORDING_BYTES);
  try {
    const samples = await reader.readChannel(
      span.channel,
      span.startSample,
      span.endSample - span.startSample,
    );
    const noise = await readNoise(reader, span, sampleRateHz);
    const sigmaFs = noise.length > 0 ? robustSigma(noise) : 0;
    return measureSpan(samples, {
      ...span,
      sampleRateHz,
      firstSample: span.startSample,
      thresholdFs: Math.max(THRESHOLD_SIGMAS * sigmaFs, LEAST_THRESHOLD_FS),
      noise: noise.length > 0 ? { samples: noise } : null,
      fullScaleV: context.fullScaleV,
      preampGainDb: context.preampGainDb,
      observableLowHz: context.sensorLowHz ?? 0,
      observableHighHz: Math.min(context.sensorHighHz ?? Infinity, HIGHEST_OF_RATE * sampleRateHz),
    });
  } finally {
    await reader.close();
  }
}

async function readNoise(reader: BlockReader, span: MarkedSpan, sampleRateHz: number): Promise<Float32Array> {
  const wanted = Math.max(LEAST_LEAD_SAMPLES, Math.round(LEAD_S * sampleRateHz));
  const before = Math.min(wanted, span.startSample);
  if (before >= LEAST_LEAD_SAMPLES)
    return reader.readChannel(span.channel, span.startSample - before, before);
  const after = Math.min(wanted, reader.frames - span.endSample);
  return after >= LEAST_LEAD_SAMPLES
    ? reader.readChannel(span.channel, span.endSample, after)
    : new Float32Array(0);
}
