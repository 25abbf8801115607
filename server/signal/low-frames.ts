import { FrameSpectrum } from './frame-spectrum.ts';
import { LowRateSignal } from './low-rate.ts';

const FRAME_S = 0.064;

export interface LowFrameVisitor {
  /** @param startSample first sample of the recording that reaches into the frame. */
  (spectrum: FrameSpectrum, startSample: number): void;
}

/** Frames of about 64 ms, hop half, of a recording reduced to 8 to 16 kHz: what is too slow for the long frames. */
export class LowFrames {
  readonly rateHz: number;
  readonly size: number;
  readonly #signal: LowRateSignal;
  readonly #spectrum: FrameSpectrum;
  readonly #frame: Float32Array;
  readonly #firstSample: number;
  readonly #visit: LowFrameVisitor;
  #filled = 0;
  #taken = 0;

  /** @param firstSample place in the recording of the first sample that will be pushed. */
  constructor(sampleRateHz: number, firstSample: number, visit: LowFrameVisitor) {
    this.#signal = new LowRateSignal(sampleRateHz, (sample) => this.#take(sample));
    this.rateHz = this.#signal.rateHz;
    this.size = 2 ** Math.max(5, Math.round(Math.log2(FRAME_S * this.rateHz)));
    this.#spectrum = new FrameSpectrum(this.size);
    this.#frame = new Float32Array(this.size);
    this.#firstSample = firstSample;
    this.#visit = visit;
  }

  /** Samples of the recording from one frame to the next. */
  get hopSamples(): number {
    return (this.size / 2) * this.#signal.factor;
  }

  push(samples: Float32Array, from: number, to: number): void {
    this.#signal.push(samples, from, to);
  }

  #take(sample: number): void {
    this.#frame[this.#filled++] = sample;
    this.#taken++;
    if (this.#filled < this.size) return;
    this.#spectrum.analyse(this.#frame, 0, this.size);
    this.#visit(this.#spectrum, this.#firstSample + (this.#taken - this.size) * this.#signal.factor);
    this.#frame.copyWithin(0, this.size / 2);
    this.#filled = this.size / 2;
  }
}
