import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { findBandwidth, type FloorSpectrum } from '../../server/signal/bandwidth.ts';
import { realFft } from '../../server/signal/fft.ts';
import { hannWindow } from '../../server/signal/hann.ts';
import { floorSpectrum } from '../server/signal/floor-spectrum.ts';
import { addDampedSine } from '../../server/setup/demo-audio/damped-sine.ts';
import { between, seededRandom } from '../../shared/lib/seeded-random.ts';
import { pinkNoise, whiteNoise } from '../../server/setup/demo-audio/noise.ts';

// Prints where the bandwidth of files ends that were compressed with loss or converted from a lower rate, as the recordings'
// measurement finds it and as the ratio of the spectra before and after tells. Needs ffmpeg and SoX.
// Run: npx tsx tests/bench/bandwidth-accuracy.ts [--write]   (--write keeps the spectra for the tests)

interface Case {
  name: string;
  /** Rate of the noise that goes in, and of the file that comes out. */
  rateHz: number;
  outRateHz: number;
  /** Options of ffmpeg's encoder, or effects of SoX. */
  codec?: { ending: string; options: string[] };
  effects?: string[];
  /** Edge that the encoder was asked for, where it was. */
  askedHz?: number;
  /** Of the samples that come out, 24 without; and what they are multiplied by before. */
  bits?: number;
  gain?: number;
}

const FIXTURE = new URL('../../fixtures/bandwidth/spectra.json', import.meta.url);
const SECONDS = 20;
const SEED = 7;

function mp3(kbit: number, cutoffHz?: number): Case {
  const cutoff = cutoffHz === undefined ? [] : ['-cutoff', String(cutoffHz)];
  const options = ['-c:a', 'libmp3lame', '-b:a', `${kbit}k`, ...cutoff];
  return {
    ...{ name: `mp3 ${kbit} kbit/s`, rateHz: 44_100, outRateHz: 44_100, codec: { ending: 'mp3', options } },
    ...(cutoffHz === undefined ? {} : { name: `mp3 ${kbit} kbit/s, cut-off ${cutoffHz}`, askedHz: cutoffHz }),
  };
}

function coded(name: string, ending: string, outRateHz: number, ...options: string[]): Case {
  return { name, rateHz: outRateHz, outRateHz, codec: { ending, options } };
}

function converted(rateHz: number, outRateHz: number): Case {
  return { name: `${rateHz} Hz to ${outRateHz} Hz`, rateHz, outRateHz, effects: ['rate', String(outRateHz)] };
}

const CASES: readonly Case[] = [
  mp3(64),
  mp3(128),
  mp3(192),
  mp3(128, 16_000),
  mp3(96, 15_000),
  { ...coded('aac 64 kbit/s', 'm4a', 48_000, '-c:a', 'aac', '-b:a', '64k') },
  { ...coded('aac 128 kbit/s', 'm4a', 44_100, '-c:a', 'aac', '-b:a', '128k') },
  {
    ...coded('aac 96, cut-off 14000', 'm4a', 48_000, '-c:a', 'aac', '-b:a', '96k', '-cutoff', '14000'),
    askedHz: 14_000,
  },
  coded('opus 32 kbit/s', 'opus', 48_000, '-c:a', 'libopus', '-b:a', '32k'),
  coded('opus 96 kbit/s', 'opus', 48_000, '-c:a', 'libopus', '-b:a', '96k'),
  coded('vorbis quality 3', 'ogg', 44_100, '-c:a', 'libvorbis', '-q:a', '3'),
  coded('vorbis quality 0', 'ogg', 48_000, '-c:a', 'libvorbis', '-q:a', '0'),
  { ...mp3(128), name: 'mp3 128 kbit/s, then 96 kHz', outRateHz: 96_000 },
  converted(44_100, 96_000),
  converted(48_000, 96_000),
  converted(48_000, 192_000),
  converted(44_100, 192_000),
  converted(96_000, 192_000),
  converted(22_050, 48_000),
  { ...converted(48_000, 96_000), name: '48000 Hz to 96000 Hz, quiet, 16 bits', bits: 16, gain: 0.02 },
  { ...mp3(128), name: 'mp3 128 kbit/s, quiet, 16 bits', bits: 16, gain: 0.02 },
  { name: 'nothing done, 48 kHz', rateHz: 48_000, outRateHz: 48_000 },
  { name: 'nothing done, 192 kHz', rateHz: 192_000, outRateHz: 192_000 },
];

function noiseAndClicks(rateHz: number): Float32Array {
  const samples = new Float32Array(SECONDS * rateHz);
  whiteNoise(seededRandom(SEED), 0.003)(samples);
  pinkNoise(seededRandom(SEED + 1), 0.01)(samples);
  const random = seededRandom(SEED + 2);
  for (let n = 0; n < 5 * SECONDS; n++) {
    const frequencyHz = 1000 * (rateHz / 2500) ** random();
    const decayS = between(random, [10, 60]) / frequencyHz;
    const onsetSample = Math.floor(random() * samples.length);
    addDampedSine(samples, 0, { onsetSample, frequencyHz, decayS, amplitude: 0.2 * random() }, rateHz);
  }
  return samples;
}

function run(command: string, args: string[]): void {
  const { status, stderr, error } = spawnSync(command, args, { encoding: 'utf8' });
  if (error || status !== 0) throw new Error(`${command} ${args.join(' ')}: ${error?.message ?? stderr}`);
}

function raw(rateHz: number, path: string): string[] {
  return ['-f', 'f32le', '-ar', String(rateHz), '-ac', '1', '-i', path];
}

/** What comes out of the codec or the converter, as 24-bit samples hold it. */
function processed(one: Case, samples: Float32Array, folder: string): Float32Array {
  const [before, after] = [join(folder, 'before.f32'), join(folder, 'after.f32')];
  writeFileSync(before, new Uint8Array(samples.buffer));
  if (one.codec) {
    const file = join(folder, `coded.${one.codec.ending}`);
    run('ffmpeg', ['-v', 'error', '-y', ...raw(one.rateHz, before), ...one.codec.options, file]);
    run('ffmpeg', ['-v', 'error', '-y', '-i', file, '-ar', String(one.outRateHz), '-f', 'f32le', after]);
  } else {
    const input = ['-t', 'f32', '-r', String(one.rateHz), '-c', '1', before];
    run('sox', ['-D', ...input, '-t', 'f32', '-r', String(one.outRateHz), after, ...(one.effects ?? [])]);
  }
  const bytes = readFileSync(after);
  const out = new Float32Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length));
  const scale = 2 ** ((one.bits ?? 24) - 1);
  const gain = one.gain ?? 1;
  return out.map((x) => Math.round(x * gain * scale) / scale);
}

/** Median power of frames of 8,192 samples in steps of about 100 Hz: finer than what is measured, and in another way. */
function medianPower(samples: Float32Array, rateHz: number, stepHz: number): number[] {
  const size = 8192;
  const fft = realFft(size);
  const { weights } = hannWindow(size);
  const frames: Float64Array[] = [];
  const lines = Math.round((stepHz * size) / rateHz);
  for (let from = 0; from + size <= samples.length; from += size) {
    for (let n = 0; n < size; n++) fft.input[n] = samples[from + n]! * weights[n]!;
    fft.transform();
    const output = fft.output.slice();
    frames.push(
      Float64Array.from({ length: Math.floor(size / 2 / lines) }, (_, step) => {
        let sum = 1e-20;
        for (let k = Math.max(1, step * lines); k < (step + 1) * lines; k++) {
          sum += output[2 * k]! ** 2 + output[2 * k + 1]! ** 2;
        }
        return sum;
      }),
    );
  }
  return [...frames[0]!.keys()].map((step) => {
    const sorted = frames.map((frame) => frame[step]!).sort((a, b) => a - b);
    return sorted[sorted.length >> 1]!;
  });
}

/** Highest frequency at which the quiet still holds a tenth of its power. */
function edgeByRatio(before: Float32Array, after: Float32Array, one: Case): number {
  const stepHz = 100;
  const beforePower = medianPower(before, one.rateHz, stepHz);
  const afterPower = medianPower(after, one.outRateHz, stepHz);
  const widthOf = (rateHz: number) => (Math.round((stepHz * 8192) / rateHz) * rateHz) / 8192;
  const [stepBefore, stepAfter] = [widthOf(one.rateHz), widthOf(one.outRateHz)];
  for (let step = afterPower.length - 1; step > 0; step--) {
    const hz = (step + 0.5) * stepAfter;
    const index = Math.floor(hz / stepBefore);
    if (index >= beforePower.length - 2) continue;
    const scale = (one.outRateHz / one.rateHz) * (stepBefore / stepAfter);
    if ((afterPower[step]! / beforePower[index]!) * scale > 0.1 * (one.gain ?? 1) ** 2) return hz;
  }
  return 0;
}

/** Frequencies have equal steps, and a tenth of a decibel is enough. */
function inShort({ sampleRateHz, frequenciesHz, floorDbPerHz }: FloorSpectrum) {
  const [firstHz = 0, secondHz = 0] = frequenciesHz;
  const rounded = floorDbPerHz.map((db) => Math.round(db * 10) / 10);
  return { sampleRateHz, firstHz, stepHz: secondHz - firstHz, floorDbPerHz: rounded };
}

function has(command: string): boolean {
  return spawnSync(command, ['-version']).error === undefined;
}

function writeLine(text: string): void {
  process.stdout.write(`${text}\n`);
}

const missing = ['ffmpeg', 'sox'].filter((command) => !has(command));
if (missing.length > 0) {
  writeLine(`Nothing was measured: ${missing.join(' and ')} cannot be started here.`);
} else {
  const folder = mkdtempSync(join(tmpdir(), 'recalesce-bandwidth-'));
  const kept = [];
  for (const one of CASES) {
    const before = noiseAndClicks(one.rateHz);
    const after = processed(one, before, folder);
    const floor = floorSpectrum(after, one.outRateHz);
    const found = findBandwidth(floor);
    const isLimited = one.codec !== undefined || one.effects !== undefined;
    const expectedHz = isLimited ? (one.askedHz ?? edgeByRatio(before, after, one)) : one.outRateHz / 2;
    const errorHz = found.effectiveHz - expectedHz;
    writeLine(
      `${one.name.padEnd(34)} found ${found.edge.padEnd(10)} ${found.effectiveHz.toFixed(0).padStart(6)} Hz, expected ${expectedHz.toFixed(0).padStart(6)} Hz${one.askedHz ? ' as asked' : ''}, error ${errorHz.toFixed(0).padStart(6)} Hz`,
    );
    kept.push({ name: one.name, isLimited, expectedHz: Math.round(expectedHz), ...inShort(floor) });
  }
  rmSync(folder, { recursive: true });
  if (process.argv.includes('--write')) writeFileSync(FIXTURE, JSON.stringify(kept));
}
