import { bytesPerFrame, type SampleLayout } from '@shared/audio/audio-format.ts';
import { wavEnvelope } from '@shared/audio/wav-envelope.ts';

export type SoundLayout = SampleLayout & { sampleRateHz: number };

const pieceBytes = 4 * 2 ** 20;
const mostPlainBytes = 0xffff_ff00;

/**
 * A WAV file made front to back. Its samples go over to the browser piece by piece, which keeps them outside the memory of the
 * page, on the disk where they are many.
 */
export class WavPieces {
  readonly layout: SoundLayout;
  readonly #pieces: Blob[] = [];
  #waiting: Uint8Array<ArrayBuffer>[] = [];
  #waitingBytes = 0;
  #dataBytes = 0;

  constructor(layout: SoundLayout) {
    this.layout = layout;
  }

  /** Whole frames as a data chunk holds them. */
  add(bytes: Uint8Array<ArrayBuffer>): void {
    this.#waiting.push(bytes);
    this.#waitingBytes += bytes.length;
    this.#dataBytes += bytes.length;
    if (this.#waitingBytes >= pieceBytes) this.#handOver();
  }

  get frames(): number {
    return this.#dataBytes / bytesPerFrame(this.layout);
  }

  finish(fileName: string): File {
    this.#handOver();
    const container = this.#dataBytes > mostPlainBytes ? 'RF64' : 'RIFF';
    const { head, tail } = wavEnvelope({ ...this.layout, frames: this.frames, container });
    return new File([new Uint8Array(head), ...this.#pieces, new Uint8Array(tail)], fileName, {
      type: 'audio/vnd.wave',
    });
  }

  #handOver(): void {
    this.#pieces.push(new Blob(this.#waiting));
    this.#waiting = [];
    this.#waitingBytes = 0;
  }
}
