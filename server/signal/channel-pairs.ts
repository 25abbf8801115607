/** Two channels with the same samples, or with the same samples of opposite sign. */
export interface ChannelPair {
  channel: number;
  other: number;
  inverted: boolean;
}

/** The pairs that are the same in every segment. */
export function joinChannelPairs(parts: readonly ChannelPair[][]): ChannelPair[] {
  const [first = [], ...rest] = parts;
  return first
    .filter((pair) => rest.every((part) => part.some((other) => isSamePair(pair, other))))
    .filter((pair, _, kept) => !pair.inverted || !kept.some((same) => isPlain(same, pair)));
}

function isSamePair(a: ChannelPair, b: ChannelPair): boolean {
  return a.channel === b.channel && a.other === b.other && a.inverted === b.inverted;
}

/** Keeps the pairs of channels that have not differed yet; a silent pair is equal and inverted at once. */
export class ChannelPairs {
  #pairs: ChannelPair[];

  constructor(channels: number) {
    this.#pairs = [];
    for (let channel = 0; channel < channels; channel++) {
      for (let other = channel + 1; other < channels; other++) {
        this.#pairs.push({ channel, other, inverted: false }, { channel, other, inverted: true });
      }
    }
  }

  push(channels: readonly Float32Array[], from: number, to: number): void {
    if (this.#pairs.length === 0) return;
    this.#pairs = this.#pairs.filter((pair) => isSame(channels, pair, from, to));
  }

  finish(): ChannelPair[] {
    return this.#pairs;
  }
}

function isPlain(candidate: ChannelPair, pair: ChannelPair): boolean {
  return !candidate.inverted && candidate.channel === pair.channel && candidate.other === pair.other;
}

function isSame(channels: readonly Float32Array[], pair: ChannelPair, from: number, to: number): boolean {
  const first = channels[pair.channel]!;
  const second = channels[pair.other]!;
  const sign = pair.inverted ? -1 : 1;
  for (let i = from; i < to; i++) if (first[i] !== sign * second[i]!) return false;
  return true;
}
