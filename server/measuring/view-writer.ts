import { closeSync, openSync, writeFileSync } from 'node:fs';
import { mkdir } from 'node:fs/promises';
import type { Spectrum } from '../../shared/contract/measurement.ts';
import type { PictureBand } from '../../shared/contract/views.ts';
import type { ViewSink } from '../signal/channel-pass.ts';
import { RegionWriter } from './region-writer.ts';
import { FIRST_STORED_LEVEL, viewPath, type ViewLayout, type ViewManifest } from './view-layout.ts';

const BUFFER_BYTES = 64 * 1024;
/** With many channels many regions grow at once. */
const BUFFER_BYTES_MANY_CHANNELS = 8 * 1024;
const MANY_CHANNELS = 4;

/** Writes the views of a recording while it is measured. */
export class ViewWriter {
  readonly #viewsDir: string;
  readonly #layout: ViewLayout;
  readonly #files: number[] = [];
  readonly #regions: RegionWriter[] = [];
  readonly #bufferBytes: number;
  readonly #peaksFile: number;
  readonly #framesFile: number;
  readonly #pictureFiles = new Map<PictureBand, number>();

  static async create(viewsDir: string, layout: ViewLayout): Promise<ViewWriter> {
    await mkdir(viewsDir, { recursive: true });
    return new ViewWriter(viewsDir, layout);
  }

  private constructor(viewsDir: string, layout: ViewLayout) {
    this.#viewsDir = viewsDir;
    this.#layout = layout;
    this.#bufferBytes = layout.shape.channels > MANY_CHANNELS ? BUFFER_BYTES_MANY_CHANNELS : BUFFER_BYTES;
    this.#peaksFile = this.#create(viewPath(viewsDir, 'peaks'));
    this.#framesFile = this.#create(viewPath(viewsDir, 'frames'));
    for (const { layout: picture } of layout.pictures) {
      this.#pictureFiles.set(picture.band, this.#create(viewPath(viewsDir, picture.band)));
    }
  }

  channel(channel: number): ViewSink {
    const layout = this.#layout;
    const peaks = layout.peakLevels.map((_, level) =>
      this.#region(this.#peaksFile, layout.peakRegion(channel, level)),
    );
    const columns = this.#columnRegions(channel);
    const frames = this.#region(this.#framesFile, layout.frameRegion(channel));
    const pair = new Float32Array(2);
    const pairBytes = new Uint8Array(pair.buffer);
    return {
      peak(level, minimum, maximum) {
        pair[0] = minimum;
        pair[1] = maximum;
        peaks[level]?.write(pairBytes);
      },
      column: (band, level, codes) => columns[band][level]?.write(codes),
      frameRow: (row) => frames.write(new Uint8Array(row.buffer, row.byteOffset, row.byteLength)),
    };
  }

  /** Completes the files; the manifest comes last and says that they are whole. */
  finish(manifest: ViewManifest, spectra: Spectrum[]): void {
    for (const region of this.#regions) region.finish();
    writeFileSync(viewPath(this.#viewsDir, 'spectra'), JSON.stringify(spectra));
    writeFileSync(viewPath(this.#viewsDir, 'manifest'), JSON.stringify(manifest));
  }

  close(): void {
    for (const file of this.#files.splice(0)) closeSync(file);
  }

  #columnRegions(channel: number): Record<PictureBand, (RegionWriter | undefined)[]> {
    const regions: Record<PictureBand, (RegionWriter | undefined)[]> = { audible: [], ultrasonic: [] };
    for (const [band, file] of this.#pictureFiles) {
      const levels = this.#layout.picture(band)?.layout.levels ?? 0;
      for (let level = FIRST_STORED_LEVEL; level < levels; level++) {
        regions[band][level] = this.#region(file, this.#layout.pictureRegion(band, channel, level));
      }
    }
    return regions;
  }

  #create(path: string): number {
    const file = openSync(path, 'w');
    this.#files.push(file);
    return file;
  }

  #region(file: number, region: { offsetBytes: number; sizeBytes: number }): RegionWriter {
    const writer = new RegionWriter(file, region, this.#bufferBytes);
    this.#regions.push(writer);
    return writer;
  }
}
