/** Nothing that is played is stronger: -6 dB re full scale. */
export const LIMITER_CEILING = 0.5;

const LOOK_AHEAD_S = 0.003;
const RELEASE_S = 0.12;

export interface Limiter {
  /** The sound comes out so many samples late. */
  delaySamples: number;
  /** As many outputs as channels, all blocks equally long; missing inputs count as silence. */
  process: (inputs: readonly Float32Array[], outputs: readonly Float32Array[]) => void;
}

/**
 * A peak limiter that looks ahead: the gain is down before a peak arrives, the same for all channels.
 *
 * With c the ceiling, p[n] the largest magnitude of a frame and L the look-ahead: need = min(1, c / p); the least need of L + 1 frames is
 * let back up by 1 - exp(-1 / (0.12 s rate)) of what is missing per frame; the mean of L + 1 of those is the gain of the frame L ago. Each of them is
 * at most the need of that frame, so no product passes the ceiling; rounding is cut off. What is not a number is played as silence, infinities
 * as full scale.
 *
 * Source: common practice for limiters with look-ahead: a running minimum, smoothed by a mean over the same stretch.
 */
export function createLimiter(sampleRateHz: number, channels: number): Limiter {
  const reach = Math.max(1, Math.round(LOOK_AHEAD_S * sampleRateHz));
  const release = 1 - Math.exp(-1 / (RELEASE_S * sampleRateHz));
  const delayed = Array.from({ length: channels }, () => new Float32Array(reach));
  const least = runningMinimum(reach + 1);
  const mean = runningMean(reach + 1);
  let held = 1;
  let place = 0;

  function frameGain(peak: number): number {
    const need = least(peak > LIMITER_CEILING ? LIMITER_CEILING / peak : 1);
    held = Math.min(need, held + release * (1 - held));
    return mean(held);
  }

  function process(inputs: readonly Float32Array[], outputs: readonly Float32Array[]): void {
    const length = outputs[0]?.length ?? 0;
    for (let n = 0; n < length; n++) {
      let peak = 0;
      for (let channel = 0; channel < channels; channel++)
        peak = Math.max(peak, Math.abs(playable(inputs[channel]?.[n])));
      const gain = frameGain(peak);
      for (const [channel, output] of outputs.entries()) {
        const line = delayed[channel];
        if (!line) continue;
        output[n] = clamped((line[place] ?? 0) * gain);
        line[place] = playable(inputs[channel]?.[n]);
      }
      place = (place + 1) % reach;
    }
  }

  return { delaySamples: reach, process };
}

function playable(sample: number | undefined): number {
  if (sample === undefined || Number.isNaN(sample)) return 0;
  return Number.isFinite(sample) ? sample : Math.sign(sample);
}

function clamped(sample: number): number {
  return Math.min(LIMITER_CEILING, Math.max(-LIMITER_CEILING, sample));
}

/** The least of the last `count` values; before there are as many, of 1 and those. */
function runningMinimum(count: number): (value: number) => number {
  const values = new Float64Array(count);
  const places = new Float64Array(count);
  let first = 0;
  let size = 0;
  let now = 0;
  return (value) => {
    if (size > 0 && places[first]! <= now - count) {
      first = (first + 1) % count;
      size -= 1;
    }
    while (size > 0 && values[(first + size - 1) % count]! >= value) size -= 1;
    const at = (first + size) % count;
    values[at] = value;
    places[at] = now;
    size += 1;
    now += 1;
    return values[first]!;
  };
}

/** The mean of the last `count` values; those before the first are 1. */
function runningMean(count: number): (value: number) => number {
  const values = new Float64Array(count).fill(1);
  let sum = count;
  let place = 0;
  return (value) => {
    sum += value - values[place]!;
    values[place] = value;
    place = (place + 1) % count;
    // Rounding would add up over hours: once a round the sum is made anew.
    if (place === 0) sum = values.reduce((total, one) => total + one, 0);
    return sum / count;
  };
}
