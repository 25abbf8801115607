import { join } from 'node:path';
import type { AudioFormat } from '../../shared/contract/measurement.ts';
import type { PictureBand, TileLayout } from '../../shared/contract/views.ts';
import { frameColumns, rowBands } from '../signal/frame-row.ts';
import { framesIn, frameStart, planFrames, type FramePlan } from '../signal/frame-plan.ts';
import type { Span } from '../signal/place-list.ts';
import { pyramidCell, pyramidLevels, pyramidLevelsWithin } from '../signal/pyramid.ts';
import {
  COLUMN_FACTOR,
  columnLevelsWithin,
  columnsAtLevel,
  FIRST_STORED_LEVELS,
  planPictures,
  type Picture,
} from '../signal/spectrogram-columns.ts';
import { segmentSamples } from './segment-plan.ts';

/** The files of one recording's views; all of them can be made again from its audio. */
export const VIEW_FILES = {
  manifest: 'views.json',
  peaks: 'peaks.f32',
  frames: 'frames.f32',
  spectra: 'spectra.json',
  candidates: 'candidates.ndjson',
  audible: 'audible.u8',
  ultrasonic: 'ultrasonic.u8',
} as const;

export function viewPath(viewsDir: string, file: keyof typeof VIEW_FILES): string {
  return join(viewsDir, VIEW_FILES[file]);
}

type RecordingShape = Pick<AudioFormat, 'sampleRateHz' | 'frames' | 'channels'>;

const FLOAT_BYTES = 4;
const PEAK_BYTES = 2 * FLOAT_BYTES;

/** Where everything lies in the view files: all sizes follow from rate, frames and channels. */
export class ViewLayout {
  readonly shape: RecordingShape;
  readonly plan: FramePlan;
  readonly pictures: Picture[];
  readonly peakLevels: number[];
  /** Of the table of long frames. */
  readonly frameColumns: string[];

  constructor(shape: RecordingShape) {
    this.shape = shape;
    this.plan = planFrames(shape.sampleRateHz, shape.frames);
    this.pictures = planPictures(this.plan);
    this.peakLevels = pyramidLevels(shape.frames);
    this.frameColumns = frameColumns(rowBands(this.plan));
  }

  picture(band: PictureBand): Picture | undefined {
    return this.pictures.find((picture) => picture.layout.band === band);
  }

  /** Levels of the peaks whose points lie whole in a segment; those above are joined from them. */
  get peakLevelsWithin(): number {
    return pyramidLevelsWithin(this.shape.frames, segmentSamples(this.shape.sampleRateHz)).length;
  }

  /** Levels of a picture whose columns lie whole in a segment; 0 without the picture. */
  columnLevelsWithin(band: PictureBand): number {
    const picture = this.picture(band);
    return picture ? columnLevelsWithin(picture.layout, segmentSamples(this.shape.sampleRateHz)) : 0;
  }

  /** Pairs of float32, minimum and maximum. */
  peakRegion(channel: number, level: number): FileRegion {
    return regionIn(
      channel,
      level,
      this.peakLevels.map((points) => points * PEAK_BYTES),
    );
  }

  /** One byte per bin, column after column. */
  pictureRegion(band: PictureBand, channel: number, level: number): FileRegion {
    return regionIn(channel, level - FIRST_STORED_LEVELS[band], this.#storedBytes(band));
  }

  get frameRowBytes(): number {
    return this.frameColumns.length * FLOAT_BYTES;
  }

  /** Rows of float32, one per long frame. */
  frameRegion(channel: number): FileRegion {
    return regionIn(channel, 0, [this.plan.long.count * this.frameRowBytes]);
  }

  /** The part of `peakRegion` that a segment fills. */
  peakRegionOf(segment: Span, channel: number, level: number): FileRegion {
    return partOf(this.peakRegion(channel, level), segment, pyramidCell(level), PEAK_BYTES);
  }

  /** The part of `pictureRegion` that a segment fills. */
  pictureRegionOf(segment: Span, band: PictureBand, channel: number, level: number): FileRegion {
    const { samplesPerColumn, bins } = this.picture(band)!.layout;
    const columnSamples = samplesPerColumn * COLUMN_FACTOR ** level;
    return partOf(this.pictureRegion(band, channel, level), segment, columnSamples, bins);
  }

  /** The part of `frameRegion` that a segment fills. */
  frameRegionOf(segment: Span, channel: number): FileRegion {
    return partOf(this.frameRegion(channel), segment, this.plan.long.hop, this.frameRowBytes);
  }

  /** Samples that a long frame was computed from, `endSample` exclusive. */
  longFrameSpan(index: number): { startSample: number; endSample: number } {
    const { frames } = this.shape;
    const startSample = frameStart(this.plan.long, index, frames);
    return { startSample, endSample: Math.min(startSample + this.plan.long.size, frames) };
  }

  #storedBytes(band: PictureBand): number[] {
    const layout = this.picture(band)?.layout;
    if (!layout) return [];
    const first = FIRST_STORED_LEVELS[band];
    return Array.from(
      { length: Math.max(0, layout.levels - first) },
      (_, index) => columnsAtLevel(layout.columns, index + first) * layout.bins,
    );
  }
}

export interface FileRegion {
  offsetBytes: number;
  sizeBytes: number;
}

/** Channel after channel, in each of them part after part. */
function regionIn(channel: number, part: number, partBytes: number[]): FileRegion {
  const channelBytes = partBytes.reduce((sum, bytes) => sum + bytes, 0);
  const before = partBytes.slice(0, part).reduce((sum, bytes) => sum + bytes, 0);
  return { offsetBytes: channel * channelBytes + before, sizeBytes: partBytes[part] ?? 0 };
}

/** Bytes of the points that begin in a segment. */
function partOf(region: FileRegion, segment: Span, samplesPerPoint: number, pointBytes: number): FileRegion {
  const { first, end } = framesIn({ hop: samplesPerPoint }, segment);
  return { offsetBytes: region.offsetBytes + first * pointBytes, sizeBytes: (end - first) * pointBytes };
}

/** What a client has to know to ask for tiles. @param format with the true sample rate, as the summary states it. */
export function tileLayout(format: RecordingShape): TileLayout {
  const { sampleRateHz, frames, channels } = format;
  const { pictures } = new ViewLayout(format);
  return { sampleRateHz, frames, channels, pictures: pictures.map((picture) => picture.layout) };
}
