/** The last samples of a stream, addressed by their place in it. */
export class SampleRing {
  readonly #held: Float32Array;
  #end = 0;

  constructor(capacity: number) {
    this.#held = new Float32Array(capacity);
  }

  /** Number of samples pushed so far. */
  get end(): number {
    return this.#end;
  }

  get capacity(): number {
    return this.#held.length;
  }

  push(samples: Float32Array): void {
    let from = Math.max(0, samples.length - this.#held.length);
    this.#end += from;
    while (from < samples.length) {
      const at = this.#end % this.#held.length;
      const count = Math.min(samples.length - from, this.#held.length - at);
      this.#held.set(samples.subarray(from, from + count), at);
      this.#end += count;
      from += count;
    }
  }

  /** A copy of the samples from `start` up to `end`, cut to what is held, with the place of the first. */
  read(start: number, end: number): { samples: Float32Array; firstSample: number } {
    const first = Math.max(0, start, this.#end - this.#held.length);
    const last = Math.max(first, Math.min(end, this.#end));
    const samples = new Float32Array(last - first);
    for (let done = 0; done < samples.length;) {
      const at = (first + done) % this.#held.length;
      const count = Math.min(samples.length - done, this.#held.length - at);
      samples.set(this.#held.subarray(at, at + count), done);
      done += count;
    }
    return { samples, firstSample: first };
  }
}
