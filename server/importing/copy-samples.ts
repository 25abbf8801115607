import type { AudioFormat } from '../../shared/audio/audio-format.ts';
import type { CapturePart } from '../../shared/audio/capture-set.ts';
import type { ImportControls } from './import-controls.ts';
import type { WavFileWriter } from './wav-file-writer.ts';

const PIECE_BYTES = 1024 * 1024;

/** Adds the samples of one segment, as they are, to a file of the same layout. */
export async function copySamples(
  { source, header }: CapturePart,
  whole: AudioFormat,
  writer: WavFileWriter,
  { onProgress, signal }: ImportControls,
): Promise<void> {
  for (let done = 0; done < header.dataBytes; done += PIECE_BYTES) {
    signal?.throwIfAborted();
    const wanted = Math.min(PIECE_BYTES, header.dataBytes - done);
    const piece = await source.read(header.dataOffset + done, wanted);
    if (piece.length < wanted)
      throw new Error('The archive ends before the length that its list of files gives.');
    writer.write(piece);
    onProgress?.(writer.frames / whole.frames);
  }
}
