import { closeSync, readSync, writeSync } from 'node:fs';
import { COLUMN_FACTOR } from '../signal/spectrogram-columns.ts';
import { PYRAMID_FACTOR } from '../signal/pyramid.ts';
import { viewPath, type FileRegion, type ViewLayout } from './view-layout.ts';
import { openViewFile } from './view-writer.ts';

const PAIR = 2;

/** Makes the levels whose points span several segments from the highest one that the segments wrote. */
export function joinViews(viewsDir: string, layout: ViewLayout): void {
  joinPeaks(viewsDir, layout);
  for (const { layout: picture } of layout.pictures) {
    const { band, levels, bins } = picture;
    withFile(viewPath(viewsDir, band), (file) => {
      for (const channel of channelsOf(layout)) {
        for (let level = layout.columnLevelsWithin(band); level < levels; level++) {
          const codes = readRegion(file, layout.pictureRegion(band, channel, level - 1));
          const region = layout.pictureRegion(band, channel, level);
          writeSync(file, maximaOf(codes, bins), 0, region.sizeBytes, region.offsetBytes);
        }
      }
    });
  }
}

function joinPeaks(viewsDir: string, layout: ViewLayout): void {
  withFile(viewPath(viewsDir, 'peaks'), (file) => {
    for (const channel of channelsOf(layout)) {
      for (let level = layout.peakLevelsWithin; level < layout.peakLevels.length; level++) {
        const bytes = readRegion(file, layout.peakRegion(channel, level - 1));
        const pairs = extremesOf(new Float32Array(bytes.buffer));
        const region = layout.peakRegion(channel, level);
        writeSync(file, new Uint8Array(pairs.buffer), 0, region.sizeBytes, region.offsetBytes);
      }
    }
  });
}

/** Minimum and maximum of every four pairs. */
function extremesOf(pairs: Float32Array): Float32Array {
  const points = Math.ceil(pairs.length / (PAIR * PYRAMID_FACTOR));
  const joined = new Float32Array(PAIR * points);
  for (let point = 0; point < points; point++) {
    const four = pairs.subarray(PAIR * PYRAMID_FACTOR * point, PAIR * PYRAMID_FACTOR * (point + 1));
    joined[PAIR * point] = four.reduce((least, value) => Math.min(least, value), Infinity);
    joined[PAIR * point + 1] = four.reduce((most, value) => Math.max(most, value), -Infinity);
  }
  return joined;
}

/** The maximum of every four columns, bin by bin. */
export function maximaOf(codes: Uint8Array, bins: number): Uint8Array {
  const columns = codes.length / bins;
  const joined = new Uint8Array(Math.ceil(columns / COLUMN_FACTOR) * bins);
  for (let column = 0; column < columns; column++) {
    const to = Math.floor(column / COLUMN_FACTOR) * bins;
    for (let bin = 0; bin < bins; bin++) {
      joined[to + bin] = Math.max(joined[to + bin]!, codes[column * bins + bin]!);
    }
  }
  return joined;
}

function channelsOf(layout: ViewLayout): number[] {
  return Array.from({ length: layout.shape.channels }, (_, channel) => channel);
}

function readRegion(file: number, { offsetBytes, sizeBytes }: FileRegion): Uint8Array<ArrayBuffer> {
  const bytes = new Uint8Array(sizeBytes);
  const read = readSync(file, bytes, 0, sizeBytes, offsetBytes);
  if (read !== sizeBytes) throw new Error('A view file is shorter than its segments make it.');
  return bytes;
}

function withFile(path: string, use: (file: number) => void): void {
  const file = openViewFile(path);
  try {
    use(file);
  } finally {
    closeSync(file);
  }
}
