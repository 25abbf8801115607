import { closeSync, fsyncSync, openSync, writeSync } from 'node:fs';
import { bytesPerFrame, type SampleLayout } from '../../shared/audio/audio-format.ts';
import { wavEnvelope } from '../../shared/audio/wav-envelope.ts';

/** The body of ds64 (EBU Tech 3306): its room is kept by a chunk of padding until the length is known. */
const WIDE_SIZES_BYTES = 28;
const MOST_PLAIN_BYTES = 0xffff_ff00;

/** Writes a WAV file front to back; RF64 where it grows past 4 GiB. Blocks the thread it runs in. */
export class WavFileWriter {
  readonly #layout: SampleLayout & { sampleRateHz: number };
  readonly #mostPlainBytes: number;
  readonly #file: number;
  #offset: number;
  #dataBytes = 0;

  /** @param mostPlainBytes past so many bytes of samples the file becomes RF64 */
  constructor(
    filePath: string,
    layout: SampleLayout & { sampleRateHz: number },
    mostPlainBytes = MOST_PLAIN_BYTES,
  ) {
    this.#layout = layout;
    this.#mostPlainBytes = mostPlainBytes;
    this.#file = openSync(filePath, 'wx');
    this.#offset = this.#head().length;
  }

  /** Bytes of samples as a data chunk holds them. */
  write(bytes: Uint8Array): void {
    this.#writeAll(bytes, this.#offset);
    this.#offset += bytes.length;
    this.#dataBytes += bytes.length;
  }

  /** Whole frames that were written. */
  get frames(): number {
    return Math.floor(this.#dataBytes / bytesPerFrame(this.#layout));
  }

  /** Completes the sizes and puts the file on the disk for good. */
  finish(): void {
    if (this.#dataBytes % 2 === 1) this.#writeAll(Uint8Array.of(0), this.#offset);
    this.#writeAll(this.#head(), 0);
    fsyncSync(this.#file);
  }

  close(): void {
    closeSync(this.#file);
  }

  #head(): Uint8Array {
    const { encoding, bitsPerSample, channels, sampleRateHz } = this.#layout;
    const facts = { encoding, bitsPerSample, channels, sampleRateHz, frames: this.frames };
    if (this.#dataBytes > this.#mostPlainBytes) return wavEnvelope({ ...facts, container: 'RF64' }).head;
    const room = { id: 'JUNK', body: new Uint8Array(WIDE_SIZES_BYTES) };
    return wavEnvelope({ ...facts, chunksBefore: [room] }).head;
  }

  #writeAll(bytes: Uint8Array, position: number): void {
    for (let done = 0; done < bytes.length;) {
      done += writeSync(this.#file, bytes, done, bytes.length - done, position + done);
    }
  }
}
