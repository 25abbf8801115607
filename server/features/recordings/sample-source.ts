import type { BlockReader } from '../../measuring/block-reader.ts';
import type { NoiseProfile } from '../../signal/noise-profile.ts';
import { SpectralGate } from '../../signal/spectral-gate.ts';

/** Samples `[first, end)` of one channel, asked for from front to back; stretches may overlap. */
export type SampleSource = (first: number, end: number) => Promise<Float32Array>;

export function plainSource(reader: BlockReader, channel: number): SampleSource {
  return (first, end) => reader.readChannel(channel, first, end - first);
}

/** Frames of the gate that run in before the first sample, so that its gains stand. */
const leadFrames = 4;
const pieceSamples = 65_536;

/** The same samples behind a spectral gate; what lies before the stretch that was asked for last is forgotten. */
export function gatedSource(
  plain: SampleSource,
  profile: NoiseProfile,
  reach: { firstSample: number; frames: number },
): SampleSource {
  const gate = new SpectralGate(profile);
  const start = Math.max(0, reach.firstSample - leadFrames * profile.size);
  let read = start;
  let kept: Float32Array = new Float32Array(0);
  let keptStart = start;

  async function readOn(): Promise<Float32Array> {
    if (read >= reach.frames) return gate.finish();
    const end = Math.min(reach.frames, read + pieceSamples);
    const piece = await plain(read, end);
    read = end;
    return gate.push(piece);
  }

  function forgetBefore(first: number): void {
    const gone = Math.min(kept.length, Math.max(0, first - keptStart));
    kept = kept.subarray(gone);
    keptStart += gone;
  }

  return async (first, end) => {
    forgetBefore(first);
    while (keptStart + kept.length < end) {
      kept = joined(kept, await readOn());
      forgetBefore(first);
    }
    return kept.subarray(0, end - keptStart);
  };
}

function joined(one: Float32Array, other: Float32Array): Float32Array {
  const both = new Float32Array(one.length + other.length);
  both.set(one);
  both.set(other, one.length);
  return both;
}
