import type { PictureBand } from '../../shared/contract/views.ts';
import type { ChannelContentPart, ContentTracker, OpenContent } from './channel-content.ts';
import { CourseTracker, type CoursePart, type CoursePlan } from './course.ts';
import { DropoutTracker, type DropoutPart } from './dropouts.ts';
import type { SampleFormat } from './effective-bits.ts';
import { FrameCursor, type SampleWindow } from './frame-cursor.ts';
import type { PowerRows } from './frame-engine.ts';
import type { FramePlan } from './frame-plan.ts';
import { rowBands } from './frame-row.ts';
import { LevelTracker, type LevelPart } from './levels.ts';
import type { LongFramePart } from './long-frame-statistics.ts';
import { LongFrames } from './long-frames.ts';
import { LONG_FRAMES_AT_ONCE, type PassArithmetic } from './pass-arithmetic.ts';
import { framesPerColumn, PictureColumns } from './picture-columns.ts';
import type { Span } from './place-list.ts';
import { PeakPyramid } from './pyramid.ts';
import type { SampleCell } from './sample-cells.ts';
import { ShortFrames, type ShortFrameSink } from './short-frames.ts';
import type { Picture } from './spectrogram-columns.ts';

/** Where the views of one channel go, in order of time. Arrays are reused by the caller. */
export interface ViewSink {
  peak(level: number, minimum: number, maximum: number): void;
  column(band: PictureBand, level: number, codes: Uint8Array): void;
  frameRows(rows: Float32Array): void;
}

export interface ChannelPassSettings {
  plan: FramePlan;
  /** What is measured of the recording; begins on a whole point of every level of the views. */
  segment: Span;
  pictures: readonly Picture[];
  /** Levels of the peaks and of each picture whose points lie in the segment. */
  peakLevels: number;
  columnLevels: Record<PictureBand, number>;
  course: CoursePlan;
  arithmetic: PassArithmetic;
  openContent: OpenContent;
  descriptorsByMeyda: boolean;
  spectrumPoints: number;
  /** Of the samples as they are stored. */
  sampleFormat: SampleFormat;
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
  course: CoursePart;
  longFrames: LongFramePart;
  content: ChannelContentPart;
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
  readonly #course: CourseTracker;
  readonly #pyramid: PeakPyramid;
  readonly #content: ContentTracker;
  readonly #longFrames: LongFrames;
  readonly #shortFrames: ShortFrames | undefined;
  readonly #audible: AudibleFrames | undefined;
  readonly #cell: SampleCell = { count: 0, sum: 0, squares: 0, minimum: 0, maximum: 0 };
  #dropoutPart: DropoutPart | undefined;

  constructor(settings: ChannelPassSettings) {
    const { plan, segment, arithmetic, views, fullScale, stepSize } = settings;
    const { sampleRateHz } = plan;
    this.#settings = settings;
    this.#levels = new LevelTracker(fullScale, segment);
    this.#dropouts = new DropoutTracker({ sampleRateHz, stepSize, fullScale });
    this.#course = new CourseTracker(settings.course, segment);
    this.#pyramid = new PeakPyramid(settings.peakLevels, (level, low, high) => views.peak(level, low, high));
    this.#content = settings.openContent({
      sampleRateHz,
      sampleFormat: settings.sampleFormat,
      longBands: rowBands(plan),
      longHop: plan.long.hop,
      segment,
      sumMeans: arithmetic.sumMeans,
      sumLowMeans: arithmetic.sumLowMeans,
    });
    this.#audible = openAudible(settings);
    this.#longFrames = this.#openLongFrames();
    this.#shortFrames = arithmetic.short && new ShortFrames(settings, arithmetic.short, this.#course);
    // Frames wait for others until they make a column.
    const { audible, short } = plan;
    this.historySamples = Math.max(
      audible.size + framesPerColumn('audible') * audible.hop,
      short.size + framesPerColumn('ultrasonic') * short.hop,
      this.#dropouts.historySamples,
    );
  }

  /** @param from place in the window of the first sample not yet seen. */
  push(window: SampleWindow, from: number): void {
    const { startSample, endSample } = this.#settings.segment;
    const first = Math.max(from, startSample - window.startSample);
    const end = Math.min(window.endSample, endSample) - window.startSample;
    if (first < end) this.#pushSamples(window, first, end);
    this.#longFrames.advance(window);
    this.#audible?.advance(window);
    this.#shortFrames?.advance(window);
  }

  finish(nonFiniteSamples: number): ChannelPart {
    if (!this.#dropoutPart) throw new RangeError('segment: its last sample was never pushed');
    this.#pyramid.finish();
    this.#audible?.columns.finish();
    this.#shortFrames?.finish();
    return {
      nonFiniteSamples,
      levels: this.#levels.finish(),
      dropouts: this.#dropoutPart,
      course: this.#course.finish(),
      longFrames: this.#longFrames.finish(),
      content: this.#content.finish(),
    };
  }

  /** The samples `[from, to)` of the window, all of them in the segment. */
  #pushSamples(window: SampleWindow, from: number, to: number): void {
    this.#pushCells(window, from, to);
    this.#dropouts.push(window, from, to);
    this.#content.pushSamples(window.samples, from, to);
    if (window.startSample + to === this.#settings.segment.endSample) {
      this.#dropoutPart = this.#dropouts.finish(window, to);
    }
  }

  #pushCells({ samples, startSample }: SampleWindow, from: number, to: number): void {
    const table = this.#settings.arithmetic.sumCells(samples, { from, to, startSample: startSample + from });
    const { count, sums, squares, minima, maxima } = table;
    const cell = this.#cell;
    for (let c = 0, at = from; c < count; c++, at += cell.count) {
      cell.count = table.samples[c]!;
      cell.sum = sums[c]!;
      cell.squares = squares[c]!;
      cell.minimum = minima[c]!;
      cell.maximum = maxima[c]!;
      this.#levels.push(cell, samples, at, startSample + at);
      this.#course.push(cell);
      this.#pyramid.push(cell);
    }
  }

  #openLongFrames(): LongFrames {
    const { plan, segment, arithmetic, spectrumPoints, descriptorsByMeyda, views } = this.#settings;
    const audible = this.#audible;
    const sharing = audible?.rows === arithmetic.long ? audible : undefined;
    return new LongFrames({
      cursor: new FrameCursor(
        plan.long,
        plan.frames,
        segment,
        LONG_FRAMES_AT_ONCE,
        framesPerColumn('audible'),
      ),
      rows: arithmetic.long,
      openTables: arithmetic.openTables,
      bands: rowBands(plan).length,
      sampleRateHz: plan.sampleRateHz,
      size: plan.long.size,
      spectrumPoints,
      capacity: LONG_FRAMES_AT_ONCE,
      byMeyda: descriptorsByMeyda,
      onTable: (rows) => views.frameRows(rows),
      onBands: (index, values, at) => this.#content.pushLong(index, values, at),
      onRows: (count) => sharing?.columns.push(sharing.rows, count),
    });
  }
}

/** The frames of the audible picture: those of the long frames, or longer ones that have a transform of their own. */
class AudibleFrames {
  readonly rows: PowerRows;
  readonly columns: PictureColumns;
  readonly #cursor: FrameCursor | undefined;

  constructor(rows: PowerRows, columns: PictureColumns, cursor: FrameCursor | undefined) {
    this.rows = rows;
    this.columns = columns;
    this.#cursor = cursor;
  }

  advance(window: SampleWindow): void {
    const cursor = this.#cursor;
    for (let run = cursor?.take(window); run !== undefined; run = cursor?.take(window)) {
      this.rows.analyse(window, run.first, run.end);
      this.columns.push(this.rows, run.end - run.first);
    }
  }
}

function openAudible(settings: ChannelPassSettings): AudibleFrames | undefined {
  const { pictures, plan, segment, arithmetic } = settings;
  const picture = pictures.find(({ layout }) => layout.band === 'audible');
  if (!picture) return undefined;
  const columns = new PictureColumns(picture, settings);
  if (!arithmetic.audible) return new AudibleFrames(arithmetic.long, columns, undefined);
  const together = framesPerColumn('audible');
  const cursor = new FrameCursor(picture.grid, plan.frames, segment, LONG_FRAMES_AT_ONCE, together);
  return new AudibleFrames(arithmetic.audible, columns, cursor);
}
