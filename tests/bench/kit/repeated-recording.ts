import { closeSync, openSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import { encodeFrames } from '../../../server/setup/demo-audio/encode-frames.ts';
import { bytesPerFrame } from '../../../shared/audio/audio-format.ts';
import { wavEnvelope } from '../../../shared/audio/wav-envelope.ts';
import type { Bench } from './bench.ts';
import type { MadeRecording, RecordingSpec } from './recordings.ts';
import { Scene } from './scene.ts';

/** So long a stretch is made once and written again and again: what is drawn costs as much as if all of it were new. */
const STRETCH_S = 30;

/** A long recording in little time. */
export function makeRepeatedRecording(bench: Bench, spec: Omit<RecordingSpec, 'holeFrames'>): MadeRecording {
  const { frames, sampleRateHz } = spec;
  const path = join(bench.folder, `repeated-${sampleRateHz}-${frames}.wav`);
  const dataBytes = frames * bytesPerFrame(spec);
  bench.say(`making ${Math.round(dataBytes / 1e6)} MB ...`);
  const stretch = new Float32Array(Math.min(frames, STRETCH_S * sampleRateHz));
  new Scene(sampleRateHz, 11).next(stretch);
  const bytes = encodeFrames(
    Array.from({ length: spec.channels }, () => stretch),
    spec,
  );
  const { head, tail } = wavEnvelope({ ...spec, container: 'RIFF' });
  const file = openSync(path, 'wx');
  try {
    writeSync(file, head);
    for (let done = 0; done < dataBytes; done += bytes.length)
      writeSync(file, bytes, 0, Math.min(bytes.length, dataBytes - done));
    writeSync(file, tail);
  } finally {
    closeSync(file);
  }
  return { ...spec, path, dataBytes };
}
