import { closeSync, constants, fdatasyncSync, openSync } from 'node:fs';
import type { PictureBand } from '../../shared/contract/views.ts';
import type { ViewSink } from '../signal/channel-pass.ts';
import type { Span } from '../signal/place-list.ts';
import { FIRST_STORED_LEVELS } from '../signal/spectrogram-columns.ts';
import { RegionWriter } from './region-writer.ts';
import { viewPath, type FileRegion, type ViewLayout } from './view-layout.ts';

const BUFFER_BYTES = 64 * 1024;
/** With many channels many regions grow at once. */
const BUFFER_BYTES_MANY_CHANNELS = 8 * 1024;
const MANY_CHANNELS = 4;

/** Opens a view file for writing; made when missing, kept as it is otherwise. */
export function openViewFile(path: string): number {
  return openSync(path, constants.O_RDWR | constants.O_CREAT);
}

/** Writes what a segment has of the views of a recording while it is measured. */
export class ViewWriter {
  readonly #layout: ViewLayout;
  readonly #segment: Span;
  readonly #files: number[] = [];
  readonly #regions: RegionWriter[] = [];
  readonly #bufferBytes: number;
  readonly #peaksFile: number;
  readonly #framesFile: number;
  readonly #pictureFiles = new Map<PictureBand, number>();

  constructor(viewsDir: string, layout: ViewLayout, segment: Span) {
    this.#layout = layout;
    this.#segment = segment;
    this.#bufferBytes = layout.shape.channels > MANY_CHANNELS ? BUFFER_BYTES_MANY_CHANNELS : BUFFER_BYTES;
    this.#peaksFile = this.#open(viewPath(viewsDir, 'peaks'));
    this.#framesFile = this.#open(viewPath(viewsDir, 'frames'));
    for (const { layout: picture } of layout.pictures) {
      this.#pictureFiles.set(picture.band, this.#open(viewPath(viewsDir, picture.band)));
    }
  }

  channel(channel: number): ViewSink {
    const layout = this.#layout;
    const segment = this.#segment;
    const peaks = Array.from({ length: layout.peakLevelsWithin }, (_, level) =>
      this.#region(this.#peaksFile, layout.peakRegionOf(segment, channel, level)),
    );
    const columns = this.#columnRegions(channel);
    const frames = this.#region(this.#framesFile, layout.frameRegionOf(segment, channel));
    return {
      peak: (level, minimum, maximum) => peaks[level]?.writePair(minimum, maximum),
      column: (band, level, codes) => columns[band][level]?.write(codes),
      frameRows: (rows) => frames.write(new Uint8Array(rows.buffer, rows.byteOffset, rows.byteLength)),
    };
  }

  /** Puts everything on the disk. @throws RangeError when a region was not filled. */
  finish(): void {
    for (const region of this.#regions) region.finish();
    for (const file of this.#files) fdatasyncSync(file);
  }

  close(): void {
    for (const file of this.#files.splice(0)) closeSync(file);
  }

  #columnRegions(channel: number): Record<PictureBand, (RegionWriter | undefined)[]> {
    const regions: Record<PictureBand, (RegionWriter | undefined)[]> = { audible: [], ultrasonic: [] };
    for (const [band, file] of this.#pictureFiles) {
      const levels = this.#layout.columnLevelsWithin(band);
      for (let level = FIRST_STORED_LEVELS[band]; level < levels; level++) {
        const region = this.#layout.pictureRegionOf(this.#segment, band, channel, level);
        regions[band][level] = this.#region(file, region);
      }
    }
    return regions;
  }

  #open(path: string): number {
    const file = openViewFile(path);
    this.#files.push(file);
    return file;
  }

  #region(file: number, region: FileRegion): RegionWriter {
    const writer = new RegionWriter(file, region, this.#bufferBytes);
    this.#regions.push(writer);
    return writer;
  }
}
