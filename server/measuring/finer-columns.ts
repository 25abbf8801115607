import { setImmediate as nextTurn } from 'node:timers/promises';
import { finerFrameStart, finerGrid } from '../signal/finer-frames.ts';
import { PaddedSpectrum } from '../signal/padded-spectrum.ts';
import { encodeColumn, type Picture } from '../signal/spectrogram-columns.ts';
import type { BlockReader } from './block-reader.ts';

export interface FinerColumnsRequest {
  picture: Picture;
  channel: number;
  /** Below 0. */
  level: number;
  firstColumn: number;
  columns: number;
}

const spectra = new Map<string, PaddedSpectrum>();
/** Columns made before everybody else gets a turn. */
const COLUMNS_PER_TURN = 64;

/** Columns of a level below 0, made from the samples when asked for. */
export async function finerColumns(reader: BlockReader, request: FinerColumnsRequest): Promise<Uint8Array> {
  const { picture, columns } = request;
  const codes = new Uint8Array(columns * picture.layout.bins);
  for (let done = 0; done < columns; done += COLUMNS_PER_TURN) {
    const count = Math.min(COLUMNS_PER_TURN, columns - done);
    await fillColumns(reader, request, { done, count }, codes);
    if (done + count < columns) await nextTurn();
  }
  return codes;
}

async function fillColumns(
  reader: BlockReader,
  { picture, channel, level, firstColumn }: FinerColumnsRequest,
  { done, count }: { done: number; count: number },
  codes: Uint8Array,
): Promise<void> {
  const { layout, firstBin, endBin } = picture;
  const grid = finerGrid(layout.frameSamples, level);
  const startOf = (index: number) => finerFrameStart(grid, firstColumn + done + index, reader.frames);
  const readFrom = startOf(0);
  const readTo = Math.min(startOf(count - 1) + grid.frameSamples, reader.frames);
  const samples = await reader.readChannel(channel, readFrom, readTo - readFrom);
  const spectrum = spectrumOf(layout.frameSamples, grid.frameSamples);
  // No await from here on: the transform's buffers are shared by the whole thread.
  for (let index = 0; index < count; index++) {
    const from = startOf(index) - readFrom;
    const to = Math.min(from + grid.frameSamples, samples.length);
    spectrum.analyse(samples, from, to, { first: firstBin, end: endBin });
    encodeColumn(spectrum.power, firstBin, endBin, codes, (done + index) * layout.bins);
  }
}

function spectrumOf(size: number, frameSamples: number): PaddedSpectrum {
  const key = `${size}/${frameSamples}`;
  const known = spectra.get(key) ?? new PaddedSpectrum(size, frameSamples);
  spectra.set(key, known);
  return known;
}
