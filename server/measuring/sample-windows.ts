import type { SampleWindow } from '../signal/frame-cursor.ts';
import type { BlockReader } from './block-reader.ts';

/** The newest samples of every channel: the block just read, and as many before it as its readers look back. */
export class SampleWindows {
  readonly channels: SampleWindow[];
  /** Place in every window of the first sample of the newest block. */
  from = 0;
  readonly blockFrames: number;
  readonly #historySamples: number;

  constructor(channels: number, historySamples: number, blockFrames: number) {
    this.#historySamples = historySamples;
    this.blockFrames = blockFrames;
    this.channels = Array.from({ length: channels }, () => ({
      samples: new Float32Array(historySamples + blockFrames),
      startSample: 0,
      endSample: 0,
    }));
  }

  /** Reads the next block. @returns samples that were not finite, per channel; `null` at the end. */
  async readNext(reader: BlockReader): Promise<number[] | null> {
    const endSample = this.channels[0]!.endSample;
    const count = Math.min(this.blockFrames, reader.frames - endSample);
    if (count <= 0) return null;
    this.#dropOldest();
    this.from = endSample - this.channels[0]!.startSample;
    const nonFinite = await reader.read(
      endSample,
      count,
      this.channels.map((window) => window.samples),
      this.from,
    );
    for (const window of this.channels) window.endSample += count;
    return nonFinite;
  }

  #dropOldest(): void {
    for (const window of this.channels) {
      const held = window.endSample - window.startSample;
      const surplus = held - this.#historySamples;
      if (surplus <= 0) continue;
      window.samples.copyWithin(0, surplus, held);
      window.startSample += surplus;
    }
  }
}
