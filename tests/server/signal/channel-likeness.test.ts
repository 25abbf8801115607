import { describe, expect, it } from 'vitest';
import { ChannelLikeness, joinLikeness } from '../../../server/signal/channel-likeness.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function alike(channels: Float32Array[], block = 5000, segment = channels[0]!.length) {
  const parts = [];
  const frames = channels[0]!.length;
  for (let start = 0; start < frames; start += segment) {
    const likeness = new ChannelLikeness(channels.length);
    const end = Math.min(frames, start + segment);
    for (let from = start; from < end; from += block) {
      likeness.push(channels, { from, to: Math.min(end, from + block), startSample: from });
    }
    parts.push(likeness.finish());
  }
  return joinLikeness(parts);
}

describe('channels that are nearly the same', () => {
  const noise = whiteNoiseSignal(60_000, 0.1, 1);

  it('are told with their gain and sign', () => {
    const quieter = noise.map((x, n) => -0.5 * x + 1e-4 * Math.sin(n * n));
    const [pair, ...others] = alike([noise, whiteNoiseSignal(60_000, 0.1, 2), quieter]);
    expect(others).toEqual([]);
    expect(pair).toMatchObject({ channel: 0, other: 2 });
    expect(pair!.correlation).toBeLessThan(-0.9999);
    expect(pair!.gainDb).toBeCloseTo(-6.02, 1);
  });

  it('are not two that share what is 30 dB over what differs', () => {
    expect(alike([noise, mix(noise, whiteNoiseSignal(60_000, 0.1 / 31, 3))])).toEqual([]);
    expect(alike([noise, mix(noise, whiteNoiseSignal(60_000, 0.1 / 300, 3))])).toHaveLength(1);
  });

  it('are not two that hear the same hum and offset and each its own noise', () => {
    const hum = sine(60_000, 50, 192_000, 0.5).map((x) => x + 0.2);
    const heard = (seed: number) => mix(hum, whiteNoiseSignal(60_000, 1e-3, seed));
    expect(alike([heard(4), heard(5)])).toEqual([]);
  });

  it('are found in blocks and segments of any length, and among many', () => {
    const many = [4, 5, 6, 7, 8].map((seed) => whiteNoiseSignal(60_000, 0.1, seed));
    const channels = [...many, many[3]!.map((x) => 0.25 * x)];
    for (const [block, segment] of [
      [60_000, 60_000],
      [777, 60_000],
      [5000, 25_600],
    ] as const) {
      expect(alike(channels, block, segment)).toMatchObject([{ channel: 3, other: 5 }]);
    }
  });

  it('are none where a channel is silent, alone or missing', () => {
    expect(alike([noise, new Float32Array(60_000)])).toEqual([]);
    expect(alike([noise])).toEqual([]);
    expect(joinLikeness([])).toEqual([]);
  });
});
