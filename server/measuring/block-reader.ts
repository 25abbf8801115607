import { open, type FileHandle } from 'node:fs/promises';
import { bytesPerFrame, type SampleLayout } from '../../shared/audio/audio-format.ts';
import { decodeChannel, zeroNonFinite } from '../../shared/audio/pcm-decode.ts';
import type { EngineArray, FrameDecoder, FrameEngine } from '../signal/frame-engine.ts';
import { packageEngine } from '../signal/package-engine.ts';
import { decodeWithWavDecoder, SMALL_RECORDING_BYTES } from './small-recording.ts';

/** What a reader has to know of a header. */
export interface AudioPlace {
  format: SampleLayout & { frames: number };
  /** Byte of the file at which the first frame begins. */
  dataOffset: number;
}

const PIECE_BYTES = 1024 * 1024;

/**
 * Reads whole frames of a WAV file by their place and decodes them; memory depends on neither length nor request. A small recording
 * is decoded once, at the first read.
 */
export class BlockReader {
  readonly frames: number;
  readonly #place: AudioPlace;
  readonly #file: FileHandle;
  readonly #piece: EngineArray<Uint8Array>;
  readonly #pieceBytes: number;
  readonly #decode: FrameDecoder;
  readonly #frameBytes: number;
  #small: Promise<Float32Array[]> | undefined;

  /**
   * @param engine that decodes; where its samples are read into its own memory, they are not copied.
   * @param mostPieceBytes that are read at once; a small recording always is.
   */
  static async open(
    filePath: string,
    place: AudioPlace,
    engine = packageEngine(),
    mostPieceBytes = PIECE_BYTES,
  ): Promise<BlockReader> {
    return new BlockReader(await open(filePath, 'r'), place, engine, mostPieceBytes);
  }

  private constructor(file: FileHandle, place: AudioPlace, engine: FrameEngine, mostPieceBytes: number) {
    this.#file = file;
    this.#place = place;
    this.frames = place.format.frames;
    this.#frameBytes = bytesPerFrame(place.format);
    const wantedBytes = Math.min(
      Math.max(mostPieceBytes, SMALL_RECORDING_BYTES),
      Math.max(1, this.frames) * this.#frameBytes,
    );
    this.#pieceBytes = Math.max(1, Math.floor(wantedBytes / this.#frameBytes)) * this.#frameBytes;
    this.#piece = engine.bytes(this.#pieceBytes);
    this.#decode = engine.decoder(place.format, this.#pieceBytes);
  }

  /**
   * Decodes the frames `[startSample, startSample + count)` into `out[channel][at ...]`.
   *
   * @returns per channel, how many samples were not finite; each was stored as zero.
   * @throws RangeError outside the recording; Error when the file ends before its header says.
   */
  async read(startSample: number, count: number, out: readonly Float32Array[], at = 0): Promise<number[]> {
    this.#requireInside(startSample, count);
    if (this.#isSmall) return this.#readSmall(startSample, count, out, at);
    const nonFinite = new Array<number>(this.#place.format.channels).fill(0);
    await this.#eachPiece(startSample, count, (bytes, done, frames) => {
      const targets = out.map((samples) => samples.subarray(at + done, at + done + frames));
      const decoded = this.#decode(bytes, targets);
      for (const [channel, found] of decoded.nonFiniteSamples.entries()) nonFinite[channel]! += found;
    });
    return nonFinite;
  }

  /** The samples of one channel, `count` from `startSample`; the others are read, but not decoded. */
  async readChannel(channel: number, startSample: number, count: number): Promise<Float32Array> {
    this.#requireInside(startSample, count);
    const { format } = this.#place;
    const samples = new Float32Array(count);
    if (this.#isSmall) {
      const known = (await this.#decodedWhole())[channel]!;
      samples.set(known.subarray(startSample, startSample + count));
      zeroNonFinite(samples, count);
      return samples;
    }
    await this.#eachPiece(startSample, count, (bytes, done) => {
      decodeChannel(bytes, format, channel, samples.subarray(done));
    });
    return samples;
  }

  async close(): Promise<void> {
    await this.#file.close();
  }

  async #readSmall(
    startSample: number,
    count: number,
    out: readonly Float32Array[],
    at: number,
  ): Promise<number[]> {
    const channels = await this.#decodedWhole();
    return channels.map((samples, channel) => {
      const target = out[channel]!.subarray(at, at + count);
      target.set(samples.subarray(startSample, startSample + count));
      return zeroNonFinite(target, count);
    });
  }

  #decodedWhole(): Promise<Float32Array[]> {
    this.#small ??= this.#readBytes(0, this.frames).then((bytes) =>
      decodeWithWavDecoder(bytes, this.#place.format),
    );
    return this.#small;
  }

  get #isSmall(): boolean {
    return this.frames * this.#frameBytes <= SMALL_RECORDING_BYTES;
  }

  #requireInside(startSample: number, count: number): void {
    if (startSample < 0 || startSample + count > this.frames) {
      throw new RangeError(`startSample: ${startSample} and ${count} more are not within ${this.frames}`);
    }
  }

  /** The bytes of whole frames, one piece after the other; each is gone when the next is asked for. */
  async #eachPiece(
    startSample: number,
    count: number,
    use: (bytes: Uint8Array, done: number, frames: number) => void,
  ): Promise<void> {
    const framesPerPiece = this.#pieceBytes / this.#frameBytes;
    for (let done = 0; done < count; done += framesPerPiece) {
      const frames = Math.min(framesPerPiece, count - done);
      use(await this.#readBytes(startSample + done, frames), done, frames);
    }
  }

  async #readBytes(startSample: number, frames: number): Promise<Uint8Array> {
    const length = frames * this.#frameBytes;
    const position = this.#place.dataOffset + startSample * this.#frameBytes;
    let filled = 0;
    while (filled < length) {
      const { bytesRead } = await this.#file.read(
        this.#piece.values,
        filled,
        length - filled,
        position + filled,
      );
      if (bytesRead === 0) throw new Error('The audio file ends before the length that its header gives.');
      filled += bytesRead;
    }
    return this.#piece.values.subarray(0, length);
  }
}
