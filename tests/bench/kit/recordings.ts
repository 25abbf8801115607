import { closeSync, existsSync, openSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import { encodeFrames } from '../../../server/setup/demo-audio/encode-frames.ts';
import { bytesPerFrame, type SampleLayout } from '../../../shared/audio/audio-format.ts';
import { wavEnvelope } from '../../../shared/audio/wav-envelope.ts';
import { segmentSamples } from '../../../server/measuring/segment-plan.ts';
import type { Bench } from './bench.ts';
import { Scene } from './scene.ts';

export interface RecordingSpec extends SampleLayout {
  sampleRateHz: number;
  frames: number;
  /** So many frames at the start are a hole in the file, which reads as zeros. */
  holeFrames?: number;
}

export interface MadeRecording extends RecordingSpec {
  path: string;
  dataBytes: number;
}

const BLOCK_FRAMES = 1 << 18;
const MOST_RIFF_BYTES = 4e9;
const ULTRASONIC: SampleLayout & { sampleRateHz: number } = {
  sampleRateHz: 192_000,
  encoding: 'integer',
  bitsPerSample: 24,
  channels: 1,
};

/** A recording of 192 kHz and 24 bits: 503 MB, or 101 MB of whole segments for a quick look. */
export function mainRecording(bench: Bench): MadeRecording {
  return ultrasonicRecording(bench, bench.isQuick ? 2 : 10);
}

/** One of the same kind that is so many segments long. */
export function ultrasonicRecording(bench: Bench, segments: number): MadeRecording {
  const frames = Math.round(segments * segmentSamples(ULTRASONIC.sampleRateHz));
  return makeRecording(bench, { ...ULTRASONIC, frames });
}

/** Made when it is first asked for. */
export function makeRecording(bench: Bench, spec: RecordingSpec): MadeRecording {
  const { sampleRateHz, encoding, bitsPerSample, channels, frames, holeFrames = 0 } = spec;
  const name = `${sampleRateHz}-${encoding}${bitsPerSample}-${channels}ch-${frames}-${holeFrames}.wav`;
  const path = join(bench.folder, name);
  const dataBytes = frames * bytesPerFrame(spec);
  if (!existsSync(path)) {
    bench.say(`making ${name}, ${Math.round(dataBytes / 1e6)} MB ...`);
    writeRecording(path, spec, dataBytes);
  }
  return { ...spec, path, dataBytes };
}

function writeRecording(path: string, spec: RecordingSpec, dataBytes: number): void {
  const { frames, holeFrames = 0, channels, sampleRateHz } = spec;
  const container = dataBytes > MOST_RIFF_BYTES ? 'RF64' : 'RIFF';
  const { head, tail } = wavEnvelope({ ...spec, container });
  const scene = new Scene(sampleRateHz, 11);
  const file = openSync(path, 'wx');
  try {
    writeSync(file, head, 0, head.length, 0);
    for (let from = holeFrames; from < frames; from += BLOCK_FRAMES) {
      const block = new Float32Array(Math.min(BLOCK_FRAMES, frames - from));
      scene.next(block);
      const bytes = encodeFrames(lanesOf(block, channels), spec);
      writeSync(file, bytes, 0, bytes.length, head.length + from * bytesPerFrame(spec));
    }
    writeSync(file, tail, 0, tail.length, head.length + dataBytes);
  } finally {
    closeSync(file);
  }
}

const DELAY_SAMPLES = 7;

/** Further channels hear the same later and weaker. */
function lanesOf(block: Float32Array, channels: number): Float32Array[] {
  return Array.from({ length: channels }, (_, channel) => {
    const delay = DELAY_SAMPLES * channel;
    return block.map((_, i) => block[Math.max(0, i - delay)]! * 0.9 ** channel);
  });
}
