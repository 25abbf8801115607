import { ChannelLikeness } from '../signal/channel-likeness.ts';
import type { OpenContent } from '../signal/channel-content.ts';
import { ChannelPairs } from '../signal/channel-pairs.ts';
import { ChannelPass } from '../signal/channel-pass.ts';
import type { FrameEngine } from '../signal/frame-engine.ts';
import { fullScaleThreshold, stepSize } from '../signal/levels.ts';
import { openArithmetic, type PassArithmetic } from '../signal/pass-arithmetic.ts';
import type { Span } from '../signal/place-list.ts';
import type { BlockReader } from './block-reader.ts';
import type { MeasureControls } from './measure-controls.ts';
import type { MeasurePlan } from './measure-plan.ts';
import { SampleWindows } from './sample-windows.ts';
import type { SegmentDetection } from './segment-detection.ts';
import type { SegmentPart } from './segment-parts.ts';
import type { Segment } from './segment-plan.ts';
import type { ViewWriter } from './view-writer.ts';

const BLOCK_SAMPLES = 1 << 18;
const LEAST_BLOCK_FRAMES = 1 << 13;

export interface SegmentPassParts {
  plan: MeasurePlan;
  segment: Segment;
  views: ViewWriter;
  detection: SegmentDetection;
  /** The samples that are read for it. */
  reach: Span;
  engine: FrameEngine;
  openContent: OpenContent;
}

/** The channels of one segment, walked together. */
export class SegmentPass {
  readonly #parts: SegmentPassParts;
  readonly #channels: ChannelPass[];
  readonly #windows: SampleWindows;
  readonly #pairs: ChannelPairs;
  readonly #likeness: ChannelLikeness;
  readonly #nonFinite: number[];

  constructor(parts: SegmentPassParts) {
    const { plan, engine, reach } = parts;
    const { channels } = plan.format;
    const wanted = Math.max(LEAST_BLOCK_FRAMES, Math.floor(BLOCK_SAMPLES / channels));
    const blockFrames = Math.min(wanted, reach.endSample - reach.startSample);
    const arithmetic = openArithmetic(engine, plan.layout.plan, plan.layout.pictures, blockFrames);
    this.#parts = parts;
    this.#channels = Array.from({ length: channels }, (_, channel) => this.#openChannel(channel, arithmetic));
    this.#windows = new SampleWindows(engine, {
      channels,
      startSample: reach.startSample,
      historySamples: Math.max(...this.#channels.map((pass) => pass.historySamples)),
      blockFrames,
    });
    this.#pairs = new ChannelPairs(channels);
    this.#likeness = new ChannelLikeness(channels);
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

  finish(): SegmentPart {
    return {
      channels: this.#channels.map((pass, channel) => pass.finish(this.#nonFinite[channel]!)),
      pairs: this.#pairs.finish(),
      likeness: this.#likeness.finish(),
      detection: this.#parts.detection.finish(),
    };
  }

  #measureBlock(nonFinite: number[], isOwn: boolean): void {
    const { from, channels } = this.#windows;
    const to = channels[0]!.endSample - channels[0]!.startSample;
    if (isOwn) {
      for (const [channel, found] of nonFinite.entries()) this.#nonFinite[channel]! += found;
      const samples = channels.map((window) => window.samples);
      this.#pairs.push(samples, from, to);
      this.#likeness.push(samples, { from, to, startSample: channels[0]!.startSample + from });
    }
    for (const [channel, window] of channels.entries()) {
      this.#channels[channel]!.push(window, from);
      this.#parts.detection.push(channel, window.samples.subarray(from, to));
    }
    this.#parts.detection.settle();
  }

  #openChannel(channel: number, arithmetic: PassArithmetic): ChannelPass {
    const { plan, segment, views, detection, openContent } = this.#parts;
    const { format, layout, course, descriptors, spectrumPoints } = plan;
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
      arithmetic,
      openContent,
      descriptorsByMeyda: descriptors === 'meyda',
      spectrumPoints,
      sampleFormat: format,
      stepSize: stepSize(format),
      fullScale: fullScaleThreshold(format.encoding, format.bitsPerSample),
      views: views.channel(channel),
      shortFrame: detection.shortFrameSink(channel),
    });
  }
}
