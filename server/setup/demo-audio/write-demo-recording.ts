import { open } from 'node:fs/promises';
import { addDampedSine, dampedSineLength, type DampedSine } from './damped-sine.ts';
import type { DemoRecordingSpec } from './demo-recording-spec.ts';
import { encodeFrames } from './encode-frames.ts';
import { hum } from './hum.ts';
import { lowPassed, type NextSamples } from './low-pass.ts';
import { metadataChunk } from './metadata-chunks.ts';
import { pinkNoise, whiteNoise } from './noise.ts';
import { seededRandom } from '../../../shared/lib/seeded-random.ts';
import { trueBursts } from './true-bursts.ts';
import { wavEnvelope } from '../../../shared/audio/wav-envelope.ts';

const BLOCK_FRAMES = 65_536;

/** Writes the WAV file of a demo recording block by block; the same spec gives the same bytes. */
export async function writeDemoRecording(
  spec: DemoRecordingSpec,
  path: string,
): Promise<{ sizeBytes: number; frames: number }> {
  const frames = Math.round(spec.seconds * spec.sampleRateHz);
  const { head, tail } = wavEnvelope({ ...spec, frames, chunksBefore: spec.metadata.map(metadataChunk) });
  const channels = Array.from({ length: spec.channels }, (_, channel) => channelSignal(spec, channel));
  const file = await open(path, 'w');
  try {
    await file.writeFile(head);
    for (let start = 0; start < frames; start += BLOCK_FRAMES) {
      const count = Math.min(BLOCK_FRAMES, frames - start);
      await file.writeFile(
        encodeFrames(
          channels.map((next) => next(count)),
          spec,
        ),
      );
    }
    await file.writeFile(tail);
    return { sizeBytes: (await file.stat()).size, frames };
  } finally {
    await file.close();
  }
}

function channelSignal(spec: DemoRecordingSpec, channel: number): NextSamples {
  const raw = rawSignal(spec, channel);
  return spec.bandLimitHz === undefined ? raw : lowPassed(raw, spec.bandLimitHz, spec.sampleRateHz);
}

function rawSignal(spec: DemoRecordingSpec, channel: number): NextSamples {
  // Each channel has its own noise; the hum reaches all of them alike.
  const noiseSeed = spec.seed + 1000 * (channel + 1);
  const lines = spec.hum.map(({ frequencyHz, levelDb }) => ({
    frequencyHz,
    amplitude: 10 ** (levelDb / 20),
  }));
  const parts = [
    pinkNoise(seededRandom(noiseSeed), 10 ** (spec.noise.pinkDb / 20)),
    whiteNoise(seededRandom(noiseSeed + 1), 10 ** (spec.noise.whiteDb / 20)),
    hum(lines, spec.sampleRateHz, seededRandom(spec.seed + 1)),
  ];
  const addBursts = burstAdder(channelBursts(spec, channel), spec.sampleRateHz);
  let start = 0;
  return (count) => {
    const out = new Float32Array(count);
    for (const addNext of parts) addNext(out);
    addBursts(out, start);
    start += count;
    return out;
  };
}

function channelBursts(spec: DemoRecordingSpec, channel: number): DampedSine[] {
  const bursts = trueBursts(spec);
  if (channel === 0 || !spec.otherChannels) return bursts;
  const { delaySamples, levelDb } = spec.otherChannels;
  const gain = 10 ** (levelDb / 20);
  return bursts.map((burst) => ({
    ...burst,
    onsetSample: burst.onsetSample + delaySamples * channel,
    amplitude: burst.amplitude * gain,
  }));
}

/** Blocks come in order, so bursts that have ended are never looked at again. */
function burstAdder(bursts: DampedSine[], sampleRateHz: number): (out: Float32Array, start: number) => void {
  let waiting = bursts;
  return (out, start) => {
    const end = start + out.length;
    for (const burst of waiting) {
      if (burst.onsetSample >= end) break;
      addDampedSine(out, start, burst, sampleRateHz);
    }
    waiting = waiting.filter((burst) => burst.onsetSample + dampedSineLength(burst, sampleRateHz) > end);
  };
}
