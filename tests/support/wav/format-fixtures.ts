import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { z } from 'zod';

const folder = path.resolve(import.meta.dirname, '../../../fixtures/formats');

const probeSchema = z.object({
  streams: z.tuple([
    z.object({
      codec_name: z.string(),
      sample_rate: z.coerce.number(),
      channels: z.number(),
      bits_per_sample: z.number(),
      bits_per_raw_sample: z.coerce.number().optional(),
      duration_ts: z.number().optional(),
    }),
  ]),
});

/** A file of another program with what a second program says of it. */
export interface FormatFixture {
  name: string;
  bytes: Uint8Array<ArrayBuffer>;
  sampleRateHz: number;
  channels: number;
  bitsPerSample: number;
  encoding: 'integer' | 'float';
  /** Undefined where the header cannot tell. */
  frames: number | undefined;
  /** One array per channel, full scale 1. */
  samples: Float64Array[];
}

export function fixtureNames(pattern: RegExp): string[] {
  return readdirSync(folder).filter((name) => pattern.test(name));
}

export function fixtureBytes(name: string): Uint8Array<ArrayBuffer> {
  return new Uint8Array(readFileSync(path.join(folder, name)));
}

export function formatFixture(name: string): FormatFixture {
  const text = readFileSync(path.join(folder, `${name}.json`), 'utf8');
  const [stream] = probeSchema.parse(JSON.parse(text)).streams;
  const { channels, sample_rate: sampleRateHz, duration_ts: frames } = stream;
  const interleaved = new Float64Array(fixtureBytes(`${name}.f64`).buffer);
  return {
    name,
    bytes: fixtureBytes(name),
    sampleRateHz,
    channels,
    bitsPerSample: stream.bits_per_sample || (stream.bits_per_raw_sample ?? Number.NaN),
    encoding: /^pcm_f/.test(stream.codec_name) ? 'float' : 'integer',
    frames,
    samples: Array.from({ length: channels }, (_, channel) =>
      interleaved.filter((_sample, n) => n % channels === channel),
    ),
  };
}
