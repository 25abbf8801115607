import { frameStart } from '../signal/frame-plan.ts';
import { FrameSpectrum } from '../signal/frame-spectrum.ts';
import { COLUMN_FACTOR, columnsAtLevel, encodeColumn, type Picture } from '../signal/spectrogram-columns.ts';
import { BlockReader, type AudioPlace } from './block-reader.ts';
import { maximaOf } from './view-join.ts';

export interface ColumnsRequest {
  source: { filePath: string; header: AudioPlace };
  picture: Picture;
  channel: number;
  firstColumn: number;
  columns: number;
}

const spectra = new Map<number, FrameSpectrum>();
/** Columns computed from one read, so that no request holds more than a few megabytes. */
const SAMPLES_PER_READ = 1 << 20;

/** Columns of a level that is not kept, made from the samples: each is the maximum of those of level 0. */
export async function computedColumns(request: ColumnsRequest & { level: number }): Promise<Uint8Array> {
  const { picture, level } = request;
  const factor = COLUMN_FACTOR ** level;
  const firstColumn = request.firstColumn * factor;
  const columns = Math.min(request.columns * factor, columnsAtLevel(picture.layout.columns, 0) - firstColumn);
  let codes = await levelZeroColumns({ ...request, firstColumn, columns });
  for (let below = 0; below < level; below++) codes = maximaOf(codes, picture.layout.bins);
  return codes;
}

/** The finest columns of a picture, made from the samples; the same as those the kept levels were made from. */
async function levelZeroColumns(request: ColumnsRequest): Promise<Uint8Array> {
  const { picture, columns } = request;
  const codes = new Uint8Array(columns * picture.layout.bins);
  const columnsPerRead = Math.max(1, Math.floor(SAMPLES_PER_READ / picture.grid.hop));
  const reader = await BlockReader.open(request.source.filePath, request.source.header);
  try {
    for (let done = 0; done < columns; done += columnsPerRead) {
      const part = { first: done, count: Math.min(columnsPerRead, columns - done) };
      await fillColumns(request, reader, part, codes);
    }
  } finally {
    await reader.close();
  }
  return codes;
}

async function fillColumns(
  request: ColumnsRequest,
  reader: BlockReader,
  part: { first: number; count: number },
  codes: Uint8Array,
): Promise<void> {
  const { picture, channel } = request;
  const { grid, firstBin, endBin } = picture;
  const { frames } = reader;
  const firstFrame = request.firstColumn + part.first;
  const readFrom = frameStart(grid, firstFrame, frames);
  const lastStart = frameStart(grid, firstFrame + part.count - 1, frames);
  const readTo = Math.min(lastStart + grid.size, frames);
  const samples = await reader.readChannel(channel, readFrom, readTo - readFrom);
  const spectrum = spectrumOf(grid.size);
  const bins = { first: firstBin, end: endBin };
  // No await from here on: the transform's buffers are shared by the whole thread.
  for (let c = 0; c < part.count; c++) {
    const from = frameStart(grid, firstFrame + c, frames) - readFrom;
    const to = Math.min(from + grid.size, samples.length);
    spectrum.analyseBins(samples, from, to, bins);
    encodeColumn(spectrum.power, firstBin, endBin, codes, (part.first + c) * picture.layout.bins);
  }
}

function spectrumOf(size: number): FrameSpectrum {
  const known = spectra.get(size) ?? new FrameSpectrum(size);
  spectra.set(size, known);
  return known;
}
