import type { DetectedCandidate } from '../../shared/contract/measurement.ts';

/**
 * Makes one candidate per burst from the candidates of all channels, while they come in.
 *
 * Candidates whose onsets lie within the tolerance after an earliest one are the same burst as other sensors heard it: the
 * earliest channel speaks, the others are listed. A channel gives at most one candidate to a burst, so two bursts of one
 * channel never become one.
 */
export class CandidateMerger {
  readonly #toleranceSamples: number;
  #pending: DetectedCandidate[] = [];

  /** @param toleranceSamples largest difference of arrival between channels, 0 or more. */
  constructor(toleranceSamples: number) {
    this.#toleranceSamples = toleranceSamples;
  }

  push(candidates: readonly DetectedCandidate[]): void {
    this.#pending.push(...candidates);
  }

  /** Bursts that no candidate from `settledSample` on can join, by rising onset. */
  take(settledSample: number): DetectedCandidate[] {
    const pending = this.#pending.sort((a, b) => a.onsetSample - b.onsetSample || a.channel - b.channel);
    const merged: DetectedCandidate[] = [];
    const used = new Set<DetectedCandidate>();
    for (const [index, lead] of pending.entries()) {
      if (lead.onsetSample + this.#toleranceSamples >= settledSample) break;
      if (!used.has(lead)) merged.push(this.#join(lead, pending, index, used));
    }
    if (used.size > 0) this.#pending = pending.filter((candidate) => !used.has(candidate));
    return merged;
  }

  finish(): DetectedCandidate[] {
    return this.take(Infinity);
  }

  #join(
    lead: DetectedCandidate,
    pending: readonly DetectedCandidate[],
    index: number,
    used: Set<DetectedCandidate>,
  ): DetectedCandidate {
    const channels = [lead.channel];
    used.add(lead);
    for (let at = index + 1; at < pending.length; at++) {
      const other = pending[at];
      if (!other || other.onsetSample - lead.onsetSample > this.#toleranceSamples) break;
      if (used.has(other) || channels.includes(other.channel)) continue;
      used.add(other);
      channels.push(other.channel);
    }
    return { ...lead, channels: channels.sort((a, b) => a - b) };
  }
}

/** The same for candidates that are all there. */
export function mergeOverChannels(
  byChannel: readonly (readonly DetectedCandidate[])[],
  toleranceSamples: number,
): DetectedCandidate[] {
  const merger = new CandidateMerger(toleranceSamples);
  for (const candidates of byChannel) merger.push(candidates);
  return merger.finish();
}
