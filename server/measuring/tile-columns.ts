import { open, type FileHandle } from 'node:fs/promises';
import type { PictureBand } from '../../shared/contract/views.ts';
import { FIRST_STORED_LEVELS } from '../signal/spectrogram-columns.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import { computedColumns } from './computed-columns.ts';
import { finerColumns } from './finer-columns.ts';
import { viewPath, type FileRegion, type ViewLayout } from './view-layout.ts';

export interface ColumnsSource {
  viewsDir: string;
  filePath: string;
  header: AudioPlace;
}

export interface ColumnsPlace {
  band: PictureBand;
  channel: number;
  level: number;
  firstColumn: number;
  columns: number;
}

/** Codes of neighbouring columns of a level: kept ones from the views, finer ones from the samples. */
export async function readColumns(
  source: ColumnsSource,
  layout: ViewLayout,
  place: ColumnsPlace,
): Promise<Uint8Array> {
  const { band, level } = place;
  const picture = layout.picture(band)!;
  if (level >= FIRST_STORED_LEVELS[band]) return storedColumns(source, layout, place);
  if (level >= 0) return computedColumns({ source, picture, ...place });
  const reader = await BlockReader.open(source.filePath, source.header);
  try {
    return await finerColumns(reader, { picture, ...place });
  } finally {
    await reader.close();
  }
}

async function storedColumns(
  { viewsDir }: ColumnsSource,
  layout: ViewLayout,
  { band, channel, level, firstColumn, columns }: ColumnsPlace,
): Promise<Uint8Array> {
  const { bins } = layout.picture(band)!.layout;
  const file = await open(viewPath(viewsDir, band), 'r');
  try {
    return await readRegion(file, layout.pictureRegion(band, channel, level), {
      offsetBytes: firstColumn * bins,
      sizeBytes: columns * bins,
    });
  } finally {
    await file.close();
  }
}

export async function readRegion(
  file: FileHandle,
  region: FileRegion,
  part: FileRegion,
): Promise<Uint8Array> {
  const bytes = new Uint8Array(part.sizeBytes);
  const { bytesRead } = await file.read(bytes, 0, bytes.length, region.offsetBytes + part.offsetBytes);
  if (bytesRead !== bytes.length) throw new Error('A view file is shorter than its recording asks for.');
  return bytes;
}
