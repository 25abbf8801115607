import type {
  AudioFormat,
  Bandwidth,
  MeasurementSummary,
  Spectrum,
} from '../../shared/contract/measurement.ts';
import { findBandwidth } from '../signal/bandwidth.ts';
import { ChannelPairs } from '../signal/channel-pairs.ts';
import { ChannelPass, type ChannelResult } from '../signal/channel-pass.ts';
import { joinCourses, planCourse, type CoursePlan } from '../signal/course.ts';
import { directDescriptors, meydaDescriptors } from '../signal/descriptors.ts';
import { fullScaleThreshold } from '../signal/levels.ts';
import { qualityFindings } from '../signal/quality.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import { Detection } from './detection.ts';
import { SampleWindows } from './sample-windows.ts';
import { trueFormat, type MeasureContext } from './measure-context.ts';
import { makeManifest, ViewLayout, viewPath } from './view-layout.ts';
import { ViewWriter } from './view-writer.ts';

export interface MeasureInput {
  filePath: string;
  header: AudioPlace & { format: AudioFormat };
  context: MeasureContext;
  /** Gets the view files; made when missing. Give a new one and rename it when the promise is kept. */
  viewsDir: string;
}

export interface MeasureControls {
  /** From 0 to 1, after every block. */
  onProgress?: (fraction: number) => void;
  signal?: AbortSignal;
}

export interface MeasureResult {
  summary: MeasurementSummary;
  /** One `DetectedCandidate` as JSON per line, by rising onset. */
  candidatesPath: string;
  candidateCount: number;
}

const BLOCK_SAMPLES = 1 << 18;
const LEAST_BLOCK_FRAMES = 1 << 13;
/** meyda's own extractors cost more than all the rest together; past this many frames the equal direct ones run. */
const FRAMES_BY_MEYDA = 20_000;
const SPECTRUM_POINTS = 1024;
const SPECTRUM_POINTS_MANY_CHANNELS = 256;
const MANY_CHANNELS = 8;

/**
 * Measures a recording in one pass over its samples, block by block, and writes its views.
 *
 * Memory depends on rate and channels, never on length. A declared time expansion k is applied here, once: the true rate
 * is k times the rate of the file, and every frequency and duration that comes out is the true one.
 *
 * @throws Error when the file is shorter than its header says; the reason of `signal` when it is aborted.
 */
export async function measureFile(input: MeasureInput & MeasureControls): Promise<MeasureResult> {
  const format = trueFormat(input.header.format, input.context.timeExpansion);
  const layout = new ViewLayout(format);
  const reader = await BlockReader.open(input.filePath, input.header);
  const views = await ViewWriter.create(input.viewsDir, layout).catch(async (error: unknown) => {
    await reader.close();
    throw error;
  });
  const course = planCourse(format.frames, layout.plan.short.hop);
  const candidatesPath = viewPath(input.viewsDir, 'candidates');
  const detection = new Detection({
    format,
    course,
    candidatesPath,
    context: input.context,
    plan: layout.plan,
  });
  try {
    const pass = new RecordingPass({ format, layout, views, detection, course });
    await pass.run(reader, input);
    const { summary, spectra } = pass.finish(input.header.format.warnings);
    views.finish(makeManifest(format, pass.engine), spectra);
    return { summary, candidatesPath, candidateCount: detection.candidateCount };
  } finally {
    detection.close();
    views.close();
    await reader.close();
  }
}

interface RecordingPassParts {
  format: AudioFormat;
  layout: ViewLayout;
  views: ViewWriter;
  detection: Detection;
  course: CoursePlan;
}

/** The channels of one recording, walked together. */
class RecordingPass {
  readonly engine: 'meyda' | 'direct';
  readonly #parts: RecordingPassParts;
  readonly #channels: ChannelPass[];
  readonly #windows: SampleWindows;
  readonly #pairs: ChannelPairs;
  readonly #nonFinite: number[];

  constructor(parts: RecordingPassParts) {
    const { format, layout } = parts;
    this.#parts = parts;
    this.engine = layout.plan.long.count * format.channels <= FRAMES_BY_MEYDA ? 'meyda' : 'direct';
    this.#channels = Array.from({ length: format.channels }, (_, channel) => this.#openChannel(channel));
    const blockFrames = Math.max(LEAST_BLOCK_FRAMES, Math.floor(BLOCK_SAMPLES / format.channels));
    const historySamples = Math.max(...this.#channels.map((pass) => pass.historySamples));
    this.#windows = new SampleWindows(format.channels, historySamples, Math.min(blockFrames, format.frames));
    this.#pairs = new ChannelPairs(format.channels);
    this.#nonFinite = new Array<number>(format.channels).fill(0);
  }

  async run(reader: BlockReader, { onProgress, signal }: MeasureControls): Promise<void> {
    for (;;) {
      signal?.throwIfAborted();
      const nonFinite = await this.#windows.readNext(reader);
      if (!nonFinite) return;
      for (const [channel, found] of nonFinite.entries()) this.#nonFinite[channel]! += found;
      this.#measureBlock();
      onProgress?.(this.#windows.channels[0]!.endSample / reader.frames);
    }
  }

  finish(headerWarnings: readonly string[]): { summary: MeasurementSummary; spectra: Spectrum[] } {
    const { format, course, detection } = this.#parts;
    const results = this.#channels.map((pass, channel) => pass.finish(this.#nonFinite[channel]!));
    const bandwidth = widestBandwidth(format.sampleRateHz, results);
    const found = detection.finish({ results, bandwidth });
    const summary: MeasurementSummary = {
      version: 1,
      format,
      levels: results.map((result) => result.facts.levels),
      descriptors: results.map((result, channel) => ({ channel, ...result.descriptors })),
      quality: this.#findQuality(results, headerWarnings),
      bandwidth,
      ultrasonic: found.ultrasonic,
      course: joinCourses(
        course,
        results.map((result) => result.course),
        found.candidatesPerStep,
      ),
      detector: found.detector,
    };
    return { summary, spectra: results.map(toSpectrum) };
  }

  #measureBlock(): void {
    const { from, channels } = this.#windows;
    const to = channels[0]!.endSample - channels[0]!.startSample;
    this.#pairs.push(
      channels.map((window) => window.samples),
      from,
      to,
    );
    for (const [channel, window] of channels.entries()) {
      this.#channels[channel]!.push(window, from);
      this.#parts.detection.push(channel, window.samples.subarray(from, to));
    }
    this.#parts.detection.endBlock(channels[0]!.endSample);
  }

  #openChannel(channel: number): ChannelPass {
    const { format, layout, views, detection, course } = this.#parts;
    return new ChannelPass({
      channel,
      plan: layout.plan,
      pictures: layout.pictures,
      course,
      engine: this.engine === 'meyda' ? meydaDescriptors : directDescriptors,
      spectrumPoints: format.channels > MANY_CHANNELS ? SPECTRUM_POINTS_MANY_CHANNELS : SPECTRUM_POINTS,
      stepSize: stepSize(format),
      fullScale: fullScaleThreshold(format.encoding, format.bitsPerSample),
      views: views.channel(channel),
      shortFrame: detection.shortFrameSink(channel),
    });
  }

  #findQuality(results: ChannelResult[], headerWarnings: readonly string[]): MeasurementSummary['quality'] {
    const { format } = this.#parts;
    return qualityFindings({
      sampleRateHz: format.sampleRateHz,
      frames: format.frames,
      stepSize: stepSize(format),
      channels: results.map((result) => result.facts),
      pairs: this.#pairs.finish(),
      headerWarnings,
    });
  }
}

/** Height of the last bit re full scale; of floats, what single precision resolves near full scale. */
function stepSize({ encoding, bitsPerSample }: AudioFormat): number {
  return encoding === 'float' ? 2 ** -23 : 2 ** (1 - Math.min(bitsPerSample, 24));
}

/** A recording can show what its best channel can. */
function widestBandwidth(sampleRateHz: number, results: ChannelResult[]): Bandwidth {
  const each = results.map(({ spectra }) =>
    findBandwidth({
      sampleRateHz,
      frequenciesHz: spectra.frequenciesHz,
      floorDbPerHz: spectra.medianDbPerHz,
    }),
  );
  return each.reduce((widest, one) => (one.effectiveHz > widest.effectiveHz ? one : widest));
}

function toSpectrum({ spectra }: ChannelResult, channel: number): Spectrum {
  const { frequenciesHz, quietDbPerHz, activeDbPerHz, maximumDbPerHz } = spectra;
  return { channel, frequenciesHz, quietDbPerHz, activeDbPerHz, maximumDbPerHz };
}
