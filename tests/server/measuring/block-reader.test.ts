import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { open } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { BlockReader } from '../../../server/measuring/block-reader.ts';
import { SMALL_RECORDING_BYTES } from '../../../server/measuring/small-recording.ts';
import { withFileSource } from '../../../server/store/file-source.ts';
import { bytesPerFrame, type SampleLayout } from '../../../shared/audio/audio-format.ts';
import { decodeFrames } from '../../../shared/audio/pcm-decode.ts';
import { wavEnvelope, type WavEnvelopeInput } from '../../../shared/audio/wav-envelope.ts';
import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'blocks-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const widths = [
  { encoding: 'integer', bitsPerSample: 8 },
  { encoding: 'integer', bitsPerSample: 16 },
  { encoding: 'integer', bitsPerSample: 24 },
  { encoding: 'integer', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 64 },
] as const;

/** Every byte of the samples counts up by a step that meets all values, minimum and not-a-number patterns among them. */
function countingBytes(layout: SampleLayout, frames: number): Uint8Array {
  return Uint8Array.from({ length: frames * bytesPerFrame(layout) }, (_, n) => (n * 37 + (n >> 8)) & 0xff);
}

async function reading<Result>(
  name: string,
  use: (reader: BlockReader, header: WavHeader) => Promise<Result>,
): Promise<Result> {
  const file = path.join(folder, name);
  const header = await withFileSource(file, readWavHeader);
  const reader = await BlockReader.open(file, header);
  try {
    return await use(reader, header);
  } finally {
    await reader.close();
  }
}

describe('blocks of a recording', () => {
  for (const width of widths) {
    it(`of ${width.encoding} ${width.bitsPerSample} bits are the same from a small file and from a large one`, async () => {
      const layout = { ...width, channels: 3 };
      const smallFrames = Math.floor(SMALL_RECORDING_BYTES / bytesPerFrame(layout));
      for (const frames of [smallFrames, smallFrames + 1]) {
        const name = `${width.encoding}-${width.bitsPerSample}-${frames}.wav`;
        const bytes = countingBytes(layout, frames);
        const { head, tail } = wavEnvelope({ ...layout, sampleRateHz: 192_000, frames, extensible: true });
        writeFileSync(path.join(folder, name), Buffer.concat([head, bytes, tail]));
        const [start, count] = [smallFrames - 2000, 1999];
        const outs = [0, 1].map(() => Array.from({ length: 3 }, () => new Float32Array(count)));
        const nonFinite = await reading(name, (reader) => reader.read(start, count, outs[0]!));
        const part = bytes.subarray(start * bytesPerFrame(layout), (start + count) * bytesPerFrame(layout));
        expect(nonFinite).toEqual(decodeFrames(part, layout, outs[1]!).nonFiniteSamples);
        expect(outs[0]).toEqual(outs[1]);
        const second = await reading(name, (reader) => reader.readChannel(1, start, count));
        expect(second).toEqual(outs[0]![1]);
      }
    });
  }

  it('outside the recording are an error', async () => {
    const layout = { encoding: 'integer', bitsPerSample: 16, channels: 1, frames: 10 } as const;
    const { head, tail } = wavEnvelope({ ...layout, sampleRateHz: 48_000 });
    writeFileSync(path.join(folder, 'ten.wav'), Buffer.concat([head, new Uint8Array(20), tail]));
    const out = [new Float32Array(11)];
    await expect(reading('ten.wav', (reader) => reader.read(0, 11, out))).rejects.toThrow(RangeError);
    await expect(reading('ten.wav', (reader) => reader.read(-1, 2, out))).rejects.toThrow(RangeError);
    await expect(reading('ten.wav', (reader) => reader.readChannel(0, 9, 2))).rejects.toThrow(RangeError);
  });
});

describe('a file of more than 4 GB, of which only the ends are really on the disk', () => {
  /** 2,500 s of two channels at 1 MHz in 16 bits: 10 GB. */
  const layout: WavEnvelopeInput = {
    encoding: 'integer',
    bitsPerSample: 16,
    channels: 2,
    sampleRateHz: 1_000_000,
    frames: 2_500_000_000,
  };
  const lastFrames = [1000, -1000, 2000, -2000, 32_767, -32_768];

  async function writeSparse(name: string, head: Uint8Array, tail: Uint8Array): Promise<void> {
    const file = await open(path.join(folder, name), 'w');
    try {
      const endOffset = head.length + layout.frames * bytesPerFrame(layout);
      await file.write(head, 0, head.length, 0);
      await file.truncate(endOffset);
      const last = Buffer.from(Int16Array.from(lastFrames).buffer);
      await file.write(last, 0, last.length, endOffset - last.length);
      if (tail.length > 0) await file.write(tail, 0, tail.length, endOffset);
    } finally {
      await file.close();
    }
  }

  async function expectLastFrames(name: string, warnings: string[]): Promise<void> {
    expect(statSync(path.join(folder, name)).blocks * 512).toBeLessThan(1_000_000);
    await reading(name, async (reader, header) => {
      expect(header.format).toMatchObject({ frames: layout.frames, sampleRateHz: 1_000_000, warnings });
      const out = [new Float32Array(4), new Float32Array(4)];
      await reader.read(layout.frames - 4, 4, out);
      expect(out.map((samples) => [...samples].map((sample) => sample * 32_768))).toEqual([
        [0, 1000, 2000, 32_767],
        [0, -1000, -2000, -32_768],
      ]);
    });
  }

  it.each(['RF64', 'BW64'] as const)(
    '%s gives its last frames and the chunk behind them',
    async (container) => {
      const title = { id: 'LIST', body: Buffer.from('INFOISFT\u0004\0\0\0rec\0', 'latin1') };
      const { head, tail } = wavEnvelope({ ...layout, container, chunksAfter: [title] });
      await writeSparse(`${container}.wav`, head, tail);
      await expectLastFrames(`${container}.wav`, []);
      const ids = await reading(`${container}.wav`, (_, { metadata }) =>
        Promise.resolve(metadata.map(({ id }) => id)),
      );
      expect(ids).toEqual(['LIST']);
    },
  );

  it('plain RIFF whose size fields have wrapped gives its last frames, with a warning', async () => {
    const { head } = wavEnvelope({ ...layout, frames: layout.frames % 2 ** 30 });
    await writeSparse('wrapped.wav', head, new Uint8Array(0));
    await expectLastFrames('wrapped.wav', [
      'The audio is larger than the size field of a plain WAV file can say; everything up to the end of the file was taken.',
    ]);
  });

  it('plain RIFF that a recorder left with sizes of all ones gives its last frames, with a warning', async () => {
    const { head } = wavEnvelope({ ...layout, frames: 1 });
    new DataView(head.buffer, head.byteOffset).setUint32(head.length - 4, 0xffffffff, true);
    await writeSparse('cut-off.wav', head, new Uint8Array(0));
    await expectLastFrames('cut-off.wav', [
      'The header does not say how much audio follows, as when a recorder is cut off; everything up to the end of the file was taken.',
    ]);
  });

  it('a size in ds64 that the file does not reach is told with what is missing', async () => {
    const { head } = wavEnvelope({ ...layout, container: 'RF64', frames: 2 * layout.frames });
    await writeSparse('cut-short.wav', head, new Uint8Array(0));
    await expectLastFrames('cut-short.wav', [
      'The file is cut short: 10 GB of audio are missing (50 % of what its header says). The 2,500,000,000 whole frames that are there were taken.',
    ]);
  });
});
