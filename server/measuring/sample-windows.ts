import type { SampleWindow } from '../signal/frame-cursor.ts';
import type { EngineArray, FrameEngine } from '../signal/frame-engine.ts';
import type { BlockReader } from './block-reader.ts';

export interface SampleWindowsSettings {
  channels: number;
  /** First sample that will be read. */
  startSample: number;
  historySamples: number;
  blockFrames: number;
}

/** The newest samples of every channel: the block just read, and as many before it as its readers look back. */
export class SampleWindows {
  readonly channels: SampleWindow[];
  /** Place in every window of the first sample of the newest block. */
  from = 0;
  readonly #blockFrames: number;
  readonly #historySamples: number;

  constructor(
    engine: Pick<FrameEngine, 'samples'>,
    { channels, startSample, historySamples, blockFrames }: SampleWindowsSettings,
  ) {
    this.#historySamples = historySamples;
    this.#blockFrames = blockFrames;
    this.channels = Array.from(
      { length: channels },
      () => new EngineWindow(engine.samples(historySamples + blockFrames), startSample),
    );
  }

  get endSample(): number {
    return this.channels[0]!.endSample;
  }

  /** Reads the next block, at most up to `stopSample`. @returns samples that were not finite, per channel. */
  async readNext(reader: BlockReader, stopSample: number): Promise<number[]> {
    const { endSample } = this;
    const count = Math.min(this.#blockFrames, stopSample - endSample);
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

/** A window in memory that the engine reads without copying. */
class EngineWindow implements SampleWindow {
  startSample: number;
  endSample: number;
  readonly #memory: EngineArray<Float32Array>;

  constructor(memory: EngineArray<Float32Array>, startSample: number) {
    this.#memory = memory;
    this.startSample = startSample;
    this.endSample = startSample;
  }

  get samples(): Float32Array {
    return this.#memory.values;
  }
}
