import {
  addDampedSine,
  dampedSineLength,
  type DampedSine,
} from '../../../server/setup/demo-audio/damped-sine.ts';
import { pinkNoise, type AddNext } from '../../../server/setup/demo-audio/noise.ts';
import { between, seededRandom, type Random } from '../../../shared/lib/seeded-random.ts';

const NOISE_RMS = 0.01;
const HUM = [
  { frequencyHz: 50, amplitude: 0.02 },
  { frequencyHz: 150, amplitude: 0.01 },
] as const;
const CLICKS_PER_S = 4;
const LOWEST_CLICK_HZ = 4000;
const HIGHEST_CLICK_OF_RATE = 0.4;
const CLICK_DECAY_S = [50e-6, 1e-3] as const;
const CLICK_AMPLITUDE = [0.03, 0.3] as const;

/** Pink noise, hum of the mains and damped sines, as long as somebody asks for more; the same on every machine. */
export class Scene {
  readonly #sampleRateHz: number;
  readonly #random: Random;
  readonly #noise: AddNext;
  #clicks: DampedSine[] = [];
  #startSample = 0;
  #clicksMadeUntil = 0;

  constructor(sampleRateHz: number, number: number) {
    this.#sampleRateHz = sampleRateHz;
    this.#random = seededRandom(number);
    this.#noise = pinkNoise(seededRandom(number + 1), NOISE_RMS);
  }

  /** Fills `out` with the next samples. */
  next(out: Float32Array): void {
    out.fill(0);
    this.#noise(out);
    this.#addHum(out);
    const end = this.#startSample + out.length;
    while (this.#clicksMadeUntil < end) this.#makeClicks();
    for (const click of this.#clicks) addDampedSine(out, this.#startSample, click, this.#sampleRateHz);
    this.#clicks = this.#clicks.filter(
      (click) => click.onsetSample + dampedSineLength(click, this.#sampleRateHz) > end,
    );
    this.#startSample = end;
  }

  /** Those of the next second. */
  #makeClicks(): void {
    const random = this.#random;
    for (let click = 0; click < CLICKS_PER_S; click++) {
      this.#clicks.push({
        onsetSample: this.#clicksMadeUntil + Math.floor(random() * this.#sampleRateHz),
        frequencyHz: between(random, [LOWEST_CLICK_HZ, HIGHEST_CLICK_OF_RATE * this.#sampleRateHz]),
        decayS: between(random, CLICK_DECAY_S),
        amplitude: between(random, CLICK_AMPLITUDE),
      });
    }
    this.#clicksMadeUntil += this.#sampleRateHz;
  }

  /** Each sample of a sine follows from the two before; the first two of a block are computed. */
  #addHum(out: Float32Array): void {
    for (const { frequencyHz, amplitude } of HUM) {
      const step = (2 * Math.PI * frequencyHz) / this.#sampleRateHz;
      const twice = 2 * Math.cos(step);
      let before = amplitude * Math.sin(step * (this.#startSample - 2));
      let last = amplitude * Math.sin(step * (this.#startSample - 1));
      for (let i = 0; i < out.length; i++) {
        const value = twice * last - before;
        out[i]! += value;
        before = last;
        last = value;
      }
    }
  }
}
