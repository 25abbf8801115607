/** A channel of which more than this share is not a number or infinite is no measurement: one sample in a thousand. */
export const MOST_NON_FINITE_SHARE = 1e-3;

/**
 * Why a recording with samples that are not finite cannot be measured, as a sentence; `undefined` where they are a trace at most.
 *
 * Each such sample was read as 0. A trace of them is told with the measurement; more would draw clicks into every figure.
 *
 * @param nonFiniteSamples of each channel
 * @param frames of the recording, at least 1
 */
export function nonFiniteRefusal(nonFiniteSamples: readonly number[], frames: number): string | undefined {
  const worst = Math.max(0, ...nonFiniteSamples);
  if (worst <= frames * MOST_NON_FINITE_SHARE) return undefined;
  const channel = nonFiniteSamples.indexOf(worst);
  const shown = [worst, frames].map((count) => count.toLocaleString('en'));
  return `Of channel ${channel}, ${shown[0]} of ${shown[1]} samples are not a number or infinite. Up to one in a thousand is passed over; with more the recording cannot be measured.`;
}
