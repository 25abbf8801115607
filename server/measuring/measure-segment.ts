import type { AudioFormat } from '../../shared/contract/measurement.ts';
import { ChannelPairs } from '../signal/channel-pairs.ts';
import { ChannelPass } from '../signal/channel-pass.ts';
import { directDescriptors, meydaDescriptors } from '../signal/descriptors.ts';
import { detectorLeadInSamples, detectorTailSamples } from '../signal/detector-reach.ts';
import { fullScaleThreshold } from '../signal/levels.ts';
import { BlockReader } from './block-reader.ts';
import type { MeasureControls } from './measure-controls.ts';
import { describeMeasurement, type MeasureInput, type MeasurePlan } from './measure-plan.ts';
import { SampleWindows } from './sample-windows.ts';
import { openSegmentDetection, type OpenDetection, type SegmentDetection } from './segment-detection.ts';
import { SegmentParts } from './segment-parts.ts';
import type { Segment } from './segment-plan.ts';
import { ViewWriter } from './view-writer.ts';

const BLOCK_SAMPLES = 1 << 18;
const LEAST_BLOCK_FRAMES = 1 << 13;

/**
 * Measures one segment in one pass over its samples, block by block: its stretch of the views, its candidates and its part
 * are written into the folder of the views.
 *
 * Memory depends on rate and channels, never on length. The detectors begin before the segment, so that they know its
 * noise, and go on after it, so that a burst at its end is measured whole.
 *
 * @throws Error when the file is shorter than its header says; the reason of `signal` when it is aborted.
 */
export async function measureSegment(
  input: MeasureInput,
  segmentIndex: number,
  controls: MeasureControls = {},
  openDetection: OpenDetection = openSegmentDetection,
): Promise<void> {
  const plan = describeMeasurement(input);
  const segment = plan.segments[segmentIndex]!;
  const parts = new SegmentParts(input.viewsDir);
  const reader = await BlockReader.open(input.filePath, input.header);
  const views = new ViewWriter(input.viewsDir, plan.layout, segment);
  const reach = reachOf(plan, segment);
  const detection = openDetection({
    format: plan.format,
    plan: plan.layout.plan,
    context: input.context,
    segment,
    firstSample: reach.startSample,
    candidatesPath: parts.candidatesPath(segmentIndex),
  });
  try {
    const pass = new SegmentPass({ plan, segment, views, detection, reach });
    await pass.run(reader, controls);
    const part = pass.finish();
    views.finish();
    await parts.write(segmentIndex, part);
  } finally {
    detection.close();
    views.close();
    await reader.close();
  }
}

/** The samples that are read for a segment: what its frames and its detectors look at on both sides. */
function reachOf({ format, layout }: MeasurePlan, segment: Segment) {
  const before = Math.max(layout.plan.audible.size, detectorLeadInSamples(format.sampleRateHz));
  const after = Math.max(layout.plan.audible.size, detectorTailSamples(format.sampleRateHz));
  return {
    startSample: Math.max(0, segment.startSample - before),
    endSample: Math.min(format.frames, segment.endSample + after),
  };
}

interface SegmentPassParts {
  plan: MeasurePlan;
  segment: Segment;
  views: ViewWriter;
  detection: SegmentDetection;
  reach: { startSample: number; endSample: number };
}

/** The channels of one segment, walked together. */
class SegmentPass {
  readonly #parts: SegmentPassParts;
  readonly #channels: ChannelPass[];
  readonly #windows: SampleWindows;
  readonly #pairs: ChannelPairs;
  readonly #nonFinite: number[];

  constructor(parts: SegmentPassParts) {
    const { channels } = parts.plan.format;
    this.#parts = parts;
    this.#channels = Array.from({ length: channels }, (_, channel) => this.#openChannel(channel));
    const { startSample, endSample } = parts.reach;
    const blockFrames = Math.max(LEAST_BLOCK_FRAMES, Math.floor(BLOCK_SAMPLES / channels));
    this.#windows = new SampleWindows({
      channels,
      startSample,
      historySamples: Math.max(...this.#channels.map((pass) => pass.historySamples)),
      blockFrames: Math.min(blockFrames, endSample - startSample),
    });
    this.#pairs = new ChannelPairs(channels);
    this.#nonFinite = new Array<number>(channels).fill(0);
  }

  /** Blocks end where the segment begins and ends, so that each belongs to it or not. */
  async run(reader: BlockReader, { onProgress, signal }: MeasureControls): Promise<void> {
    const { segment, reach } = this.#parts;
    const { startSample, endSample } = segment;
    for (const stop of [startSample, endSample, reach.endSample]) {
      while (this.#windows.endSample < stop) {
        signal?.throwIfAborted();
        const nonFinite = await this.#windows.readNext(reader, stop);
        this.#measureBlock(nonFinite, stop === endSample);
        const done = this.#windows.endSample - startSample;
        onProgress?.(Math.min(1, Math.max(0, done / (endSample - startSample))));
      }
    }
  }

  finish() {
    return {
      channels: this.#channels.map((pass, channel) => pass.finish(this.#nonFinite[channel]!)),
      pairs: this.#pairs.finish(),
      detection: this.#parts.detection.finish(),
    };
  }

  #measureBlock(nonFinite: number[], isOwn: boolean): void {
    const { from, channels } = this.#windows;
    const to = channels[0]!.endSample - channels[0]!.startSample;
    if (isOwn) {
      for (const [channel, found] of nonFinite.entries()) this.#nonFinite[channel]! += found;
      this.#pairs.push(
        channels.map((window) => window.samples),
        from,
        to,
      );
    }
    for (const [channel, window] of channels.entries()) {
      this.#channels[channel]!.push(window, from);
      this.#parts.detection.push(channel, window.samples.subarray(from, to));
    }
    this.#parts.detection.settle();
  }

  #openChannel(channel: number): ChannelPass {
    const { plan, segment, views, detection } = this.#parts;
    const { format, layout, course, engine, spectrumPoints } = plan;
    return new ChannelPass({
      plan: layout.plan,
      segment,
      pictures: layout.pictures,
      peakLevels: layout.peakLevelsWithin,
      columnLevels: {
        audible: layout.columnLevelsWithin('audible'),
        ultrasonic: layout.columnLevelsWithin('ultrasonic'),
      },
      course,
      engine: engine === 'meyda' ? meydaDescriptors : directDescriptors,
      spectrumPoints,
      stepSize: stepSize(format),
      fullScale: fullScaleThreshold(format.encoding, format.bitsPerSample),
      views: views.channel(channel),
      shortFrame: detection.shortFrameSink(channel),
    });
  }
}

/** Height of the last bit re full scale; of floats, what single precision resolves near full scale. */
export function stepSize({ encoding, bitsPerSample }: AudioFormat): number {
  return encoding === 'float' ? 2 ** -23 : 2 ** (1 - Math.min(bitsPerSample, 24));
}
