import { FrameSpectrum } from './frame-spectrum.ts';
import type { BlockSummer } from './frame-engine.ts';
import { lowRateFactor, LowRateSignal } from './low-rate.ts';

const FRAME_S = 0.064;

/** Lines of one frame, scaled as by `FrameSpectrum`; reused. */
export interface LowFrame {
  /** First sample of the recording that reaches into the frame. */
  startSample: number;
  readonly power: Float32Array;
}

export interface LowFramesSettings {
  sampleRateHz: number;
  /** Place in the recording of the first sample that will be pushed. */
  firstSample: number;
  /** Sums of `samplesPerLowMean` samples each. */
  sumBlocks: BlockSummer;
}

/** Samples of the reduced signal in a frame. */
export function lowFrameSize(sampleRateHz: number): number {
  const rateHz = sampleRateHz / lowRateFactor(sampleRateHz);
  return 2 ** Math.max(5, Math.round(Math.log2(FRAME_S * rateHz)));
}

/** Frames of about 64 ms, hop half, of a recording reduced to 8 to 16 kHz: what is too slow for the long frames. */
export class LowFrames {
  readonly rateHz: number;
  readonly size: number;
  /** Samples of the recording from one frame to the next. */
  readonly hopSamples: number;
  readonly #signal: LowRateSignal;
  readonly #spectrum: FrameSpectrum;
  readonly #samples: Float32Array;
  readonly #firstSample: number;
  readonly #visit: (frame: LowFrame) => void;
  readonly #frame: LowFrame;
  #filled = 0;
  #visited = 0;

  constructor(settings: LowFramesSettings, visit: (frame: LowFrame) => void) {
    const { sampleRateHz, firstSample, sumBlocks } = settings;
    this.#signal = new LowRateSignal(sampleRateHz, sumBlocks);
    this.rateHz = this.#signal.rateHz;
    this.size = lowFrameSize(sampleRateHz);
    this.hopSamples = (this.size / 2) * lowRateFactor(sampleRateHz);
    this.#spectrum = new FrameSpectrum(this.size);
    this.#samples = new Float32Array(this.size);
    this.#firstSample = firstSample;
    this.#visit = visit;
    this.#frame = { startSample: firstSample, power: this.#spectrum.power };
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
