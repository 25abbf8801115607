import { createLimiter } from './limiter.ts';

/** What the scope of a worklet has beside that of a page. */
declare const sampleRate: number;
declare abstract class AudioWorkletProcessor {
  abstract process(inputs: readonly Float32Array[][], outputs: readonly Float32Array[][]): boolean;
}
declare function registerProcessor(name: string, processor: new () => AudioWorkletProcessor): void;

const CHANNELS = 2;

class LimiterProcessor extends AudioWorkletProcessor {
  readonly #limiter = createLimiter(sampleRate, CHANNELS);

  /** Goes on without an input: what it still holds has to come out. */
  override process(inputs: readonly Float32Array[][], outputs: readonly Float32Array[][]): boolean {
    this.#limiter.process(inputs[0] ?? [], outputs[0] ?? []);
    return true;
  }
}

registerProcessor('recalesce-limiter', LimiterProcessor);
