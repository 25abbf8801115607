import { rm } from 'node:fs/promises';
import type { AudioFormat } from '../../shared/audio/audio-format.ts';
import { isZip, readCaptureSet } from '../../shared/audio/capture-set.ts';
import { readCsvFile } from '../../shared/audio/csv-file.ts';
import type { RawLayout, StoredCsvLayout, StoredLayout } from '../../shared/audio/declared-layout.ts';
import { readFlacHeader } from '../../shared/audio/flac-header.ts';
import { rawFileFacts } from '../../shared/audio/raw-file.ts';
import { withFileSource } from '../store/file-source.ts';
import { copySamples } from './copy-samples.ts';
import { importCsv } from './import-csv.ts';
import { importFlac } from './import-flac.ts';
import type { ImportControls } from './import-controls.ts';
import { importRaw } from './import-raw.ts';
import { WavFileWriter } from './wav-file-writer.ts';

export interface ImportInput {
  filePath: string;
  /** Gets the WAV file; must not be there yet. */
  targetPath: string;
  layout: StoredLayout | null;
}

/** What the file really held. */
export interface Imported {
  format: AudioFormat;
  /** First frames of the pieces behind the first, where it is made of pieces taken at different times. */
  joints?: number[];
}

/**
 * Makes a WAV file of a recording that came in as something else, without changing a sample. On failure nothing is left at
 * `targetPath`.
 *
 * @throws RefusedFileError where the file cannot be read after all
 */
export async function importRecording(input: ImportInput, controls: ImportControls = {}): Promise<Imported> {
  try {
    if (input.layout === null) return await importSelfTelling(input, controls);
    if (input.layout.kind === 'raw') return await importRawFile(input, input.layout, controls);
    return await importCsvFile(input, input.layout, controls);
  } catch (error) {
    await rm(input.targetPath, { force: true });
    throw error;
  }
}

async function importSelfTelling(input: ImportInput, controls: ImportControls): Promise<Imported> {
  const isArchive = await withFileSource(input.filePath, async (source) => isZip(await source.read(0, 4)));
  return isArchive ? importCaptureSet(input, controls) : importFlacFile(input, controls);
}

/** The segments one after the other, byte by byte. */
async function importCaptureSet(input: ImportInput, controls: ImportControls): Promise<Imported> {
  return withFileSource(input.filePath, async (source) => {
    const { format, segments } = await readCaptureSet(source);
    const joints = segments.slice(1).map(({ startFrame }) => startFrame);
    const writer = new WavFileWriter(input.targetPath, format);
    return finishing(writer, async () => {
      await readCaptureSet(source, (part) => copySamples(part, format, writer, controls));
      return { format, joints };
    });
  });
}

async function importFlacFile(input: ImportInput, controls: ImportControls): Promise<Imported> {
  const header = await withFileSource(input.filePath, readFlacHeader);
  const { format } = header;
  return writing(input.targetPath, format, async (writer) => {
    const warnings = await importFlac(input.filePath, header, writer, controls);
    return { format: { ...format, frames: writer.frames, warnings: [...format.warnings, ...warnings] } };
  });
}

async function importRawFile(
  input: ImportInput,
  layout: RawLayout,
  controls: ImportControls,
): Promise<Imported> {
  const sizeBytes = await withFileSource(input.filePath, (source) => Promise.resolve(source.sizeBytes));
  const { format } = rawFileFacts(sizeBytes, layout);
  return writing(input.targetPath, format, async (writer) => {
    await importRaw(input.filePath, layout, format, writer, controls);
    return { format };
  });
}

async function importCsvFile(
  input: ImportInput,
  layout: StoredCsvLayout,
  controls: ImportControls,
): Promise<Imported> {
  const file = await withFileSource(input.filePath, (source) => readCsvFile(source, layout));
  return writing(input.targetPath, file.format, async (writer) => {
    const warnings = await importCsv(input.filePath, layout, file, writer, controls);
    return {
      format: { ...file.format, frames: writer.frames, warnings: [...file.format.warnings, ...warnings] },
    };
  });
}

async function writing(
  targetPath: string,
  format: AudioFormat,
  write: (writer: WavFileWriter) => Promise<Imported>,
): Promise<Imported> {
  const writer = new WavFileWriter(targetPath, format);
  return finishing(writer, () => write(writer));
}

async function finishing(writer: WavFileWriter, write: () => Promise<Imported>): Promise<Imported> {
  try {
    const imported = await write();
    writer.finish();
    return imported;
  } finally {
    writer.close();
  }
}
