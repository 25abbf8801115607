import { createHash } from 'node:crypto';
import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { DemoRecordingSpec } from '../../../../server/setup/demo-audio/demo-recording-spec.ts';
import { demoRecordings } from '../../../../server/setup/demo-audio/demo-recordings.ts';
import { trueBursts } from '../../../../server/setup/demo-audio/true-bursts.ts';
import { writeDemoRecording } from '../../../../server/setup/demo-audio/write-demo-recording.ts';
import { bytesSource } from '../../../../shared/audio/byte-source.ts';
import { decodeFrames } from '../../../../shared/audio/pcm-decode.ts';
import { personalMetadata } from '../../../../shared/audio/personal-metadata.ts';
import { readWavHeader, type WavHeader } from '../../../../shared/audio/wav-header.ts';
import { readWavMetadata } from '../../../../shared/audio/wav-metadata.ts';

let folder: string;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'demo-audio-'));
});
afterAll(() => rm(folder, { recursive: true }));

function recording(key: string): DemoRecordingSpec {
  const spec = demoRecordings.find((candidate) => candidate.key === key);
  if (!spec) throw new RangeError(`no demo recording ${key}`);
  return spec;
}

/** The first seconds of a recording: the same samples, a shorter file. */
function beginning(key: string, seconds: number): DemoRecordingSpec {
  return { ...recording(key), seconds };
}

type Written = { bytes: Uint8Array; header: WavHeader; channels: Float32Array[] };

async function written(spec: DemoRecordingSpec): Promise<Written> {
  const path = join(folder, spec.fileName);
  await writeDemoRecording(spec, path);
  const bytes = new Uint8Array(await readFile(path));
  const header = await readWavHeader(bytesSource(bytes));
  const { format, dataOffset, dataBytes } = header;
  const channels = Array.from({ length: format.channels }, () => new Float32Array(format.frames));
  decodeFrames(bytes.subarray(dataOffset, dataOffset + dataBytes), format, channels);
  return { bytes, header, channels };
}

function peakAt(samples: Float32Array, fromSample: number, endSample: number): number {
  return samples.subarray(fromSample, endSample).reduce((peak, x) => Math.max(peak, Math.abs(x)), 0);
}

describe('the list of demo recordings', () => {
  it('keys, file names and seeds are each used once', () => {
    for (const name of ['key', 'fileName', 'seed'] as const) {
      expect(new Set(demoRecordings.map((spec) => spec[name])).size).toBe(demoRecordings.length);
    }
  });

  it('phases follow one another from the start to the end of each recording', () => {
    for (const { phases, seconds } of demoRecordings) {
      expect(phases[0]!.startSeconds).toBe(0);
      expect(phases.at(-1)!.endSeconds).toBe(seconds);
      phases.slice(1).forEach((phase, i) => expect(phase.startSeconds).toBe(phases[i]!.endSeconds));
    }
  });

  it('all files together stay under 250 MB', () => {
    const sizes = demoRecordings.map((s) => (s.seconds * s.sampleRateHz * s.channels * s.bitsPerSample) / 8);
    expect(sizes.reduce((total, size) => total + size, 0)).toBeLessThan(250e6);
  });
});

describe('the true bursts of a recording', () => {
  it('lie in their phase, in order, apart, and below half the sample rate', () => {
    for (const spec of demoRecordings) {
      let quietFrom = 0;
      for (const burst of trueBursts(spec)) {
        const phase = spec.phases.find(
          ({ name, startSeconds, endSeconds }) =>
            name === burst.phase &&
            burst.onsetSample >= startSeconds * spec.sampleRateHz &&
            burst.endSample <= endSeconds * spec.sampleRateHz,
        );
        expect(phase).toBeDefined();
        expect(burst.onsetSample).toBeGreaterThanOrEqual(quietFrom);
        expect(burst.endSample).toBeGreaterThan(burst.onsetSample);
        expect(burst.frequencyHz).toBeLessThan(spec.bandLimitHz ?? spec.sampleRateHz / 2);
        quietFrom = burst.endSample + 0.004 * spec.sampleRateHz;
      }
    }
  });

  it('are many on both sides of the hearing line in dendritic growth and few in planar growth', () => {
    const spec = recording('stage-dendritic-a');
    const bursts = trueBursts(spec);
    const rate = (name: string): number => {
      const { startSeconds, endSeconds } = spec.phases.find((phase) => phase.name === name)!;
      return bursts.filter(({ phase }) => phase === name).length / (endSeconds - startSeconds);
    };
    expect(rate('dendritic-growth')).toBeGreaterThan(8);
    expect(rate('planar-growth')).toBeLessThan(1);
    const dendritic = bursts.filter(({ phase }) => phase === 'dendritic-growth');
    expect(dendritic.filter(({ frequencyHz }) => frequencyHz < 20_000).length).toBeGreaterThan(10);
    expect(dendritic.filter(({ frequencyHz }) => frequencyHz > 20_000).length).toBeGreaterThan(30);
  });

  it('there are none in the control', () => {
    expect(trueBursts(recording('stage-control'))).toEqual([]);
  });
});

describe('the written files', () => {
  it('the same spec gives the same bytes', async () => {
    const spec = beginning('weld', 0.3);
    const digest = async (): Promise<string> =>
      createHash('sha256')
        .update((await written(spec)).bytes)
        .digest('hex');
    expect(await digest()).toBe(await digest());
  });

  it('the header says what the spec says and nothing odd', async () => {
    for (const { key } of demoRecordings) {
      const spec = beginning(key, 0.05);
      const { format } = (await written(spec)).header;
      const { encoding, bitsPerSample, channels, sampleRateHz } = spec;
      const frames = Math.round(0.05 * sampleRateHz);
      expect(format).toMatchObject({ encoding, bitsPerSample, channels, sampleRateHz, frames, warnings: [] });
    }
  });

  it('a burst begins at its onset, and later in the second channel', async () => {
    const spec = beginning('stage-two-channels', 4);
    const { channels } = await written(spec);
    const burst = trueBursts(recording('stage-two-channels')).reduce((best, candidate) =>
      candidate.endSample < 4 * spec.sampleRateHz && candidate.amplitude > best.amplitude ? candidate : best,
    );
    const { onsetSample } = burst;
    // One half wave after the onset the burst has stood out; the hum stays below 0.02.
    const halfWave = Math.ceil(spec.sampleRateHz / burst.frequencyHz / 2) + 2;
    expect(peakAt(channels[0]!, onsetSample - 200, onsetSample)).toBeLessThan(0.03);
    expect(peakAt(channels[0]!, onsetSample, onsetSample + halfWave)).toBeGreaterThan(0.5 * burst.amplitude);
    expect(peakAt(channels[1]!, onsetSample, onsetSample + 63)).toBeLessThan(0.03);
    expect(peakAt(channels[1]!, onsetSample + 63, onsetSample + 63 + halfWave)).toBeGreaterThan(
      0.25 * burst.amplitude,
    );
  });

  it('only the recording with an operator in its header has personal metadata', async () => {
    const findings = new Map<string, string[]>();
    for (const { key } of demoRecordings) {
      const { header } = await written(beginning(key, 0.01));
      findings.set(
        key,
        personalMetadata(readWavMetadata(header.metadata)).map((finding) => finding.key),
      );
    }
    expect(findings.get('named-operator')).toEqual(['Description', 'Originator', 'OriginatorReference']);
    findings.delete('named-operator');
    expect([...findings.values()].flat()).toEqual([]);
  });

  it('the overdriven recording stops at full scale for several samples in a row', async () => {
    const [samples] = (await written(recording('overdriven'))).channels;
    let [run, longest, runs] = [0, 0, 0];
    for (const sample of samples!) {
      run = Math.abs(sample) >= 32767 / 32768 ? run + 1 : 0;
      if (run === 3) runs++;
      longest = Math.max(longest, run);
    }
    expect(longest).toBeGreaterThanOrEqual(5);
    expect(runs).toBeGreaterThanOrEqual(5);
  });

  it('above the band limit the noise floor itself falls away', async () => {
    const spec = beginning('lossy', 2);
    const [samples] = (await written(spec)).channels;
    const below = tonePower(samples!, 15_500, spec.sampleRateHz);
    const above = tonePower(samples!, 16_700, spec.sampleRateHz);
    expect(10 * Math.log10(below / above)).toBeGreaterThan(30);
  });
});

/** Mean power around a frequency: Hann-weighted correlation over pieces of 2,048 samples (Goertzel 1958). */
function tonePower(samples: Float32Array, frequencyHz: number, sampleRateHz: number): number {
  const size = 2048;
  let total = 0;
  for (let start = 0; start + size <= samples.length; start += size) {
    let [re, im] = [0, 0];
    for (let n = 0; n < size; n++) {
      const weighted = samples[start + n]! * (0.5 - 0.5 * Math.cos((2 * Math.PI * n) / size));
      re += weighted * Math.cos((2 * Math.PI * frequencyHz * n) / sampleRateHz);
      im += weighted * Math.sin((2 * Math.PI * frequencyHz * n) / sampleRateHz);
    }
    total += re * re + im * im;
  }
  return total;
}
