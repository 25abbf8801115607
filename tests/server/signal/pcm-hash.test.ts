import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { joinPcmHash, PCM_CHUNK_SAMPLES, PcmHashTracker } from '../../../server/signal/pcm-hash.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';

function hashOf(samples: Float32Array, blockSamples: number, segmentSamples = samples.length): string {
  const parts = [];
  for (let start = 0; start < samples.length; start += segmentSamples) {
    const tracker = new PcmHashTracker('integer');
    const end = Math.min(samples.length, start + segmentSamples);
    for (let at = start; at < end; at += blockSamples)
      tracker.push(samples, at, Math.min(end, at + blockSamples));
    parts.push(tracker.finish());
  }
  return joinPcmHash(parts);
}

describe('the hash of samples', () => {
  const samples = whiteNoiseSignal(3 * PCM_CHUNK_SAMPLES + 777, 0.1, 1);
  const whole = hashOf(samples, 4096);

  it('is the sha256 of the sha256 of each 1,048,576 samples', () => {
    const view = new DataView(new ArrayBuffer(4 * samples.length));
    for (const [n, sample] of samples.entries()) view.setFloat32(4 * n, sample, true);
    const outer = createHash('sha256');
    for (let at = 0; at < samples.length; at += 1_048_576) {
      const bytes = new Uint8Array(view.buffer, 4 * at, 4 * Math.min(1_048_576, samples.length - at));
      outer.update(createHash('sha256').update(bytes).digest());
    }
    expect(whole).toBe(outer.digest('hex'));
  });

  it('depends on neither blocks nor segments', () => {
    expect(hashOf(samples, 1_000_000)).toBe(whole);
    expect(hashOf(samples, 999)).toBe(whole);
    expect(hashOf(samples, 5000, PCM_CHUNK_SAMPLES)).toBe(whole);
    expect(hashOf(samples, 5000, 2 * PCM_CHUNK_SAMPLES)).toBe(whole);
  });

  it('reads a window from where the samples begin', () => {
    const padded = new Float32Array(samples.length + 100);
    padded.set(samples, 100);
    const tracker = new PcmHashTracker('integer');
    tracker.push(padded.subarray(50), 50, 50 + samples.length);
    expect(joinPcmHash([tracker.finish()])).toBe(whole);
  });

  it('of floats has no sign of zero', () => {
    const hashed = (values: number[]) => {
      const tracker = new PcmHashTracker('float');
      tracker.push(Float32Array.from(values), 0, values.length);
      return joinPcmHash([tracker.finish()]);
    };
    expect(hashed([0, -0, 0.5, -0.5])).toBe(hashed([-0, 0, 0.5, -0.5]));
    expect(hashed([...samples])).toBe(whole);
  });

  it('is another one when a single sample differs, or the end is cut', () => {
    const changed = samples.slice();
    changed[100_000]! += 2 ** -24;
    expect(hashOf(changed, 4096)).not.toBe(whole);
    expect(hashOf(samples.subarray(0, -1), 4096)).not.toBe(whole);
  });
});
