import { FrameSpectrum } from './frame-spectrum.ts';
import { LowRateSignal } from './low-rate.ts';

const FRAME_S = 0.064;

/** Lines of one frame, scaled as by `FrameSpectrum`; reused. */
export interface LowFrame {
  /** First sample of the recording that reaches into the frame. */
  startSample: number;
  readonly power: Float32Array;
}

/** Frames of about 64 ms, hop half, of a recording reduced to 8 to 16 kHz: what is too slow for the long frames. */
export class LowFrames {
  readonly rateHz: number;
  readonly size: number;
  readonly #signal: LowRateSignal;
  readonly #spectrum: FrameSpectrum;
  readonly #samples: Float32Array;
  readonly #firstSample: number;
  readonly #visit: (frame: LowFrame) => void;
  readonly #frame: LowFrame;
  #filled = 0;
  #visited = 0;

  /** @param firstSample place in the recording of the first sample that will be pushed. */
  constructor(sampleRateHz: number, firstSample: number, visit: (frame: LowFrame) => void) {
    this.#signal = new LowRateSignal(sampleRateHz);
    this.rateHz = this.#signal.rateHz;
    this.size = 2 ** Math.max(5, Math.round(Math.log2(FRAME_S * this.rateHz)));
    this.#spectrum = new FrameSpectrum(this.size);
    this.#samples = new Float32Array(this.size);
    this.#firstSample = firstSample;
    this.#visit = visit;
    this.#frame = { startSample: firstSample, power: this.#spectrum.power };
  }

  /** Samples of the recording from one frame to the next. */
  get hopSamples(): number {
    return (this.size / 2) * this.#signal.factor;
  }

  push(samples: Float32Array, from: number, to: number): void {
    const reduced = this.#signal.push(samples, from, to);
    let taken = 0;
    while (taken < reduced.length) {
      const end = Math.min(reduced.length, taken + this.size - this.#filled);
      this.#samples.set(reduced.subarray(taken, end), this.#filled);
      this.#filled += end - taken;
      taken = end;
      if (this.#filled === this.size) this.#closeFrame();
    }
  }

  #closeFrame(): void {
    this.#spectrum.analyseBins(this.#samples, 0, this.size, { first: 0, end: this.size / 2 });
    this.#frame.startSample = this.#firstSample + this.#visited++ * this.hopSamples;
    this.#visit(this.#frame);
    this.#samples.copyWithin(0, this.size / 2);
    this.#filled = this.size / 2;
  }
}
