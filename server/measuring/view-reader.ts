import { open, readFile } from 'node:fs/promises';
import { z } from 'zod';
import { encodeTile, TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '../../shared/audio/tile.ts';
import { spectrumSchema, type Spectrum } from '../../shared/contract/measurement.ts';
import type { Peaks, PictureBand, QuietLevels } from '../../shared/contract/views.ts';
import {
  columnsAtLevel,
  COLUMNS_PER_TILE,
  COLUMN_FACTOR,
  type Picture,
} from '../signal/spectrogram-columns.ts';
import { peaksFromPyramid, peaksFromSamples, samplesPerPointFor } from './peaks-reader.ts';
import { quietLevels } from './quiet-levels.ts';
import { readColumns, readRegion, type ColumnsSource } from './tile-columns.ts';
import { ViewLayout, viewPath } from './view-layout.ts';
import { readManifest } from './view-manifest.ts';

/** Views are asked for that a recording does not have: a channel, a band, a level or a tile beyond its last. */
export class NoSuchViewError extends RangeError {}

export type ViewSource = ColumnsSource;

export interface PeaksRequest extends ViewSource {
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
  /** Most points wanted, 1 to 8192. */
  points: number;
}

export interface TileRequest extends ViewSource {
  channel: number;
  band: PictureBand;
  level: number;
  tile: number;
}

/**
 * Least and greatest sample of equal steps. Exact for the samples under each step: from the audio when a step is
 * shorter than 256 samples, else from the pyramid with steps that are whole cells of it (and begin on a cell).
 */
export async function readPeaks(request: PeaksRequest): Promise<Peaks> {
  const layout = await layoutOf(request.viewsDir);
  requireChannel(layout, request.channel);
  const { frames } = layout.shape;
  const startSample = Math.min(Math.max(0, request.startSample), frames - 1);
  const endSample = Math.min(Math.max(request.endSample, startSample + 1), frames);
  const span = { channel: request.channel, startSample, endSample };
  const step = samplesPerPointFor(endSample - startSample, request.points, layout.peakLevels.length);
  if (step.level === undefined) return peaksFromSamples(request, span, step.samplesPerPoint);
  return peaksFromPyramid(request.viewsDir, layout, { ...span, ...step, level: step.level });
}

/** One tile as bytes that `decodeTile` reads. @throws NoSuchViewError for a tile that the recording does not have. */
export async function readTile(request: TileRequest): Promise<Uint8Array> {
  const layout = await layoutOf(request.viewsDir);
  requireChannel(layout, request.channel);
  const picture = layout.picture(request.band);
  if (!picture) throw new NoSuchViewError(`The sample rate leaves no ${request.band} picture.`);
  const span = tileSpan(picture, request.level, request.tile);
  const { bins, lowHz, highHz, samplesPerColumn } = picture.layout;
  const { channel, level, band } = request;
  const codes = await readColumns(request, layout, { band, channel, level, ...span });
  const columnSamples = samplesPerColumn * COLUMN_FACTOR ** level;
  return encodeTile({
    bins,
    columns: span.columns,
    samplesPerColumn: columnSamples,
    startSample: span.firstColumn * columnSamples,
    lowHz,
    highHz,
    minimumDb: TILE_MINIMUM_DB,
    dbPerCode: TILE_DB_PER_CODE,
    codes,
  });
}

/** What is quiet in each bin of the pictures of a channel. */
export async function readQuietLevels(source: ViewSource, channel: number): Promise<QuietLevels> {
  const layout = await layoutOf(source.viewsDir);
  requireChannel(layout, channel);
  return quietLevels(source, layout, channel);
}

export async function readSpectrum(viewsDir: string, channel: number): Promise<Spectrum> {
  const text = await readFile(viewPath(viewsDir, 'spectra'), 'utf8');
  const spectra = z.array(spectrumSchema).parse(JSON.parse(text));
  const found = spectra.find((spectrum) => spectrum.channel === channel);
  if (!found) throw new NoSuchViewError(`There is no channel ${channel}.`);
  return found;
}

/** The long frames of a channel. */
export interface FrameTable {
  /** The place of the frame first. */
  columns: string[];
  /** One after the other; `null` where a silent frame has no value. */
  rows: AsyncGenerator<(number | null)[]>;
}

const ROWS_PER_READ = 1024;

export async function readFrameTable(viewsDir: string, channel: number): Promise<FrameTable> {
  const layout = await layoutOf(viewsDir);
  requireChannel(layout, channel);
  const columns = ['startSample', 'endSample', 'timeS', ...layout.frameColumns];
  return { columns, rows: frameRows(viewsDir, layout, channel) };
}

async function* frameRows(
  viewsDir: string,
  layout: ViewLayout,
  channel: number,
): AsyncGenerator<(number | null)[]> {
  const { long } = layout.plan;
  const { frameRowBytes } = layout;
  const file = await open(viewPath(viewsDir, 'frames'), 'r');
  try {
    for (let first = 0; first < long.count; first += ROWS_PER_READ) {
      const rows = Math.min(ROWS_PER_READ, long.count - first);
      const bytes = await readRegion(file, layout.frameRegion(channel), {
        offsetBytes: first * frameRowBytes,
        sizeBytes: rows * frameRowBytes,
      });
      const values = new Float32Array(bytes.buffer, bytes.byteOffset, bytes.byteLength / 4);
      for (let row = 0; row < rows; row++)
        yield frameRow(layout, first + row, values.subarray(row * layout.frameColumns.length));
    }
  } finally {
    await file.close();
  }
}

function frameRow(layout: ViewLayout, index: number, values: Float32Array): (number | null)[] {
  const { sampleRateHz } = layout.shape;
  const { startSample, endSample } = layout.longFrameSpan(index);
  const row: (number | null)[] = [startSample, endSample, startSample / sampleRateHz];
  for (let column = 0; column < layout.frameColumns.length; column++) {
    const value = values[column]!;
    // Seven figures are what a float32 holds; more would only look exact.
    row.push(Number.isNaN(value) ? null : Number(value.toPrecision(7)));
  }
  return row;
}

interface TileSpan {
  firstColumn: number;
  columns: number;
}

function tileSpan(picture: Picture, level: number, tile: number): TileSpan {
  const { layout } = picture;
  const columns = columnsAtLevel(layout.columns, level);
  const firstColumn = tile * COLUMNS_PER_TILE;
  const isPresent =
    Number.isInteger(level) && Number.isInteger(tile) && level >= -layout.finerLevels && tile >= 0;
  if (!isPresent || level >= layout.levels || firstColumn >= columns) {
    throw new NoSuchViewError(`There is no tile ${tile} at level ${level} of the ${layout.band} picture.`);
  }
  return { firstColumn, columns: Math.min(COLUMNS_PER_TILE, columns - firstColumn) };
}

function requireChannel(layout: ViewLayout, channel: number): void {
  if (!Number.isInteger(channel) || channel < 0 || channel >= layout.shape.channels) {
    throw new NoSuchViewError(`There is no channel ${channel}.`);
  }
}

async function layoutOf(viewsDir: string): Promise<ViewLayout> {
  return new ViewLayout((await readManifest(viewsDir)).format);
}
