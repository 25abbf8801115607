import type { PictureBand } from '../../shared/contract/views.ts';
import { CourseTracker, type CoursePart, type CoursePlan } from './course.ts';
import type { DescriptorEngine } from './descriptors.ts';
import { DropoutTracker, type DropoutPart } from './dropouts.ts';
import { FrameCursor, type SampleWindow } from './frame-cursor.ts';
import { bandBins, type FramePlan } from './frame-plan.ts';
import type { FrameRow } from './frame-row.ts';
import { FrameSpectrum, meanSquareOfBins } from './frame-spectrum.ts';
import { LevelTracker, type LevelPart } from './levels.ts';
import type { LongFramePart } from './long-frame-statistics.ts';
import { LongFrames } from './long-frames.ts';
import { MainsTracker, type MainsPart } from './mains.ts';
import type { Span } from './place-list.ts';
import { PeakPyramid } from './pyramid.ts';
import { forEachCell } from './sample-cells.ts';
import { ColumnPyramid, type Picture } from './spectrogram-columns.ts';

/** Where the views of one channel go, in order of time. Arrays are reused by the caller. */
export interface ViewSink {
  peak(level: number, minimum: number, maximum: number): void;
  column(band: PictureBand, level: number, codes: Uint8Array): void;
  frameRow(row: FrameRow): void;
}

/** Takes the lines above the hearing line of every short frame: `power[first]` to `power[end - 1]`. */
export type ShortFrameSink = (frame: ShortFrame) => void;

export interface ShortFrame {
  index: number;
  /** Sample in the middle of the frame. */
  middleSample: number;
  power: Float32Array;
  first: number;
  end: number;
}

export interface ChannelPassSettings {
  plan: FramePlan;
  /** What is measured of the recording; begins on a whole point of every level of the views. */
  segment: Span;
  pictures: Picture[];
  /** Levels of the peaks and of each picture whose points lie in the segment. */
  peakLevels: number;
  columnLevels: Record<PictureBand, number>;
  course: CoursePlan;
  engine: DescriptorEngine;
  spectrumPoints: number;
  /** Height of the last bit re full scale, and the magnitude that counts as full scale. */
  stepSize: number;
  fullScale: number;
  views: ViewSink;
  shortFrame?: ShortFrameSink;
}

/** What one segment of a channel adds to the channel: plain data, joined by `ChannelJoin`. */
export interface ChannelPart {
  nonFiniteSamples: number;
  levels: LevelPart;
  dropouts: DropoutPart;
  mains: MainsPart;
  course: CoursePart;
  longFrames: LongFramePart;
}

/**
 * All that is measured on one segment of a channel in one pass, save the detector; memory depends on the sample rate
 * alone. Samples before and after the segment are looked at only where a frame or a run reaches over its ends.
 */
export class ChannelPass {
  readonly historySamples: number;
  readonly #settings: ChannelPassSettings;
  readonly #levels: LevelTracker;
  readonly #dropouts: DropoutTracker;
  readonly #mains: MainsTracker;
  readonly #course: CourseTracker;
  readonly #pyramid: PeakPyramid;
  readonly #longFrames: LongFrames;
  readonly #longCursor: FrameCursor;
  readonly #shortFrames: ShortFrames;
  readonly #audible: PictureFrames | undefined;
  #dropoutPart: DropoutPart | undefined;

  constructor(settings: ChannelPassSettings) {
    const { plan, segment, views, pictures, fullScale, stepSize } = settings;
    const { sampleRateHz, frames } = plan;
    this.#settings = settings;
    this.#levels = new LevelTracker(fullScale, segment);
    this.#dropouts = new DropoutTracker({ sampleRateHz, stepSize, fullScale });
    this.#mains = new MainsTracker(sampleRateHz);
    this.#course = new CourseTracker(settings.course, segment);
    this.#pyramid = new PeakPyramid(settings.peakLevels, (level, low, high) => views.peak(level, low, high));
    this.#longFrames = new LongFrames({
      sampleRateHz,
      size: plan.long.size,
      spectrumPoints: settings.spectrumPoints,
      engine: settings.engine,
    });
    this.#longCursor = new FrameCursor(plan.long, frames, segment);
    this.#shortFrames = new ShortFrames(settings, this.#course);
    const audible = pictures.find((picture) => picture.layout.band === 'audible');
    this.#audible = audible && new PictureFrames(audible, settings);
    this.historySamples = Math.max(plan.audible.size, this.#dropouts.historySamples);
  }

  /** @param from place in the window of the first sample not yet seen. */
  push(window: SampleWindow, from: number): void {
    const { startSample, endSample } = this.#settings.segment;
    const first = Math.max(from, startSample - window.startSample);
    const end = Math.min(window.endSample, endSample) - window.startSample;
    if (first < end) this.#pushSamples(window, first, end);
    this.#longCursor.advance(window, (_index, values, start, stop) => this.#pushLong(values, start, stop));
    if (!this.#sharesLongFrames) this.#audible?.advance(window);
    this.#shortFrames.advance(window);
  }

  finish(nonFiniteSamples: number): ChannelPart {
    if (!this.#dropoutPart) throw new RangeError('segment: its last sample was never pushed');
    this.#pyramid.finish();
    this.#audible?.finish();
    this.#shortFrames.finish();
    return {
      nonFiniteSamples,
      levels: this.#levels.finish(),
      dropouts: this.#dropoutPart,
      mains: this.#mains.finish(),
      course: this.#course.finish(),
      longFrames: this.#longFrames.finish(),
    };
  }

  /** The samples `[from, to)` of the window, all of them in the segment. */
  #pushSamples(window: SampleWindow, from: number, to: number): void {
    const { samples } = window;
    forEachCell(samples, { from, to, startSample: window.startSample + from }, (cell, start) => {
      this.#levels.push(cell, samples, start, window.startSample + start);
      this.#course.push(cell);
      this.#pyramid.push(cell);
    });
    this.#dropouts.push(window, from, to);
    this.#mains.push(samples, from, to);
    if (window.startSample + to === this.#settings.segment.endSample) {
      this.#dropoutPart = this.#dropouts.finish(window, to);
    }
  }

  get #sharesLongFrames(): boolean {
    return this.#settings.plan.audible.size === this.#settings.plan.long.size;
  }

  #pushLong(samples: Float32Array, from: number, to: number): void {
    this.#longFrames.push(samples, from, to);
    this.#settings.views.frameRow(this.#longFrames.row);
    if (this.#sharesLongFrames) this.#audible?.pushPower(this.#longFrames.spectrum);
  }
}

/** The frames of a picture that has a transform of its own, or takes the power of another one. */
class PictureFrames {
  readonly #picture: Picture;
  readonly #cursor: FrameCursor;
  readonly #columns: ColumnPyramid;
  #spectrum: FrameSpectrum | undefined;

  constructor(picture: Picture, { plan, segment, columnLevels, views }: ChannelPassSettings) {
    const { band } = picture.layout;
    this.#picture = picture;
    this.#cursor = new FrameCursor(picture.grid, plan.frames, segment);
    this.#columns = new ColumnPyramid(picture, columnLevels[band], (level, codes) =>
      views.column(band, level, codes),
    );
  }

  advance(window: SampleWindow): void {
    const { grid, firstBin, endBin } = this.#picture;
    const bins = { first: firstBin, end: endBin };
    const spectrum = (this.#spectrum ??= new FrameSpectrum(grid.size));
    this.#cursor.advance(window, (_index, samples, from, to) => {
      spectrum.analyseBins(samples, from, to, bins);
      this.pushPower(spectrum);
    });
  }

  pushPower(spectrum: FrameSpectrum): void {
    this.#columns.push(spectrum.powerBits);
  }

  finish(): void {
    this.#columns.finish();
  }
}

/** Short frames: ultrasonic picture, course above 20 kHz, and whoever else looks at them. */
class ShortFrames {
  readonly #cursor: FrameCursor;
  readonly #spectrum: FrameSpectrum;
  readonly #picture: PictureFrames | undefined;
  readonly #course: CourseTracker;
  readonly #sink: ShortFrameSink | undefined;
  readonly #frame: ShortFrame;
  readonly #hop: number;

  constructor(settings: ChannelPassSettings, course: CourseTracker) {
    const { plan, pictures, segment } = settings;
    const { first, end } = bandBins('ultrasonic', plan.short.size, plan.sampleRateHz);
    this.#cursor = new FrameCursor(plan.short, plan.frames, segment);
    this.#spectrum = new FrameSpectrum(plan.short.size);
    const picture = pictures.find(({ layout }) => layout.band === 'ultrasonic');
    this.#picture = picture && new PictureFrames(picture, settings);
    this.#course = course;
    this.#sink = settings.shortFrame;
    this.#hop = plan.short.hop;
    this.#frame = { index: 0, middleSample: 0, power: this.#spectrum.power, first, end };
  }

  advance(window: SampleWindow): void {
    const frame = this.#frame;
    const spectrum = this.#spectrum;
    if (frame.end <= frame.first) return;
    this.#cursor.advance(window, (index, samples, from, to) => {
      spectrum.analyseBins(samples, from, to, frame);
      this.#picture?.pushPower(spectrum);
      frame.index = index;
      frame.middleSample = index * this.#hop + this.#hop / 2;
      this.#course.pushUltrasonic(frame.middleSample, meanSquareOfBins(frame.power, frame.first, frame.end));
      this.#sink?.(frame);
    });
  }

  finish(): void {
    this.#picture?.finish();
  }
}
