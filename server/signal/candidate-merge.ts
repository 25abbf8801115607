import type { DetectedCandidate } from '../../shared/contract/measurement.ts';

/**
 * One candidate per burst from the candidates of all channels: those whose onsets lie within the tolerance of an earliest
 * one are the same burst as several sensors heard it. The earliest channel speaks, the others are listed.
 *
 * A channel gives at most one candidate to a burst, so two bursts of one channel never become one.
 *
 * @param byChannel any order.
 * @param toleranceSamples largest difference of arrival between channels, 0 or more.
 * @returns by rising onset.
 */
export function mergeOverChannels(
  byChannel: readonly (readonly DetectedCandidate[])[],
  toleranceSamples: number,
): DetectedCandidate[] {
  const all = byChannel.flat().sort((a, b) => a.onsetSample - b.onsetSample || a.channel - b.channel);
  const merged: DetectedCandidate[] = [];
  let oldest = 0;
  for (const candidate of all) {
    while (oldest < merged.length && !isWithin(merged[oldest], candidate, toleranceSamples)) oldest += 1;
    const at = merged.findIndex(
      (other, index) => index >= oldest && !other.channels.includes(candidate.channel),
    );
    const same = merged[at];
    if (same) merged[at] = { ...same, channels: [...same.channels, candidate.channel].sort((a, b) => a - b) };
    else merged.push({ ...candidate, channels: [candidate.channel] });
  }
  return merged;
}

function isWithin(
  earlier: DetectedCandidate | undefined,
  later: DetectedCandidate,
  tolerance: number,
): boolean {
  return earlier !== undefined && later.onsetSample - earlier.onsetSample <= tolerance;
}
