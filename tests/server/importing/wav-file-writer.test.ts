import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { WavFileWriter } from '../../../server/importing/wav-file-writer.ts';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';

let folder: string;
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'wav-writer-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const layout = { encoding: 'integer', bitsPerSample: 24, channels: 1, sampleRateHz: 500_000 } as const;

function write(name: string, mostPlainBytes?: number): Uint8Array {
  const file = path.join(folder, name);
  const writer = new WavFileWriter(file, layout, mostPlainBytes);
  writer.write(Uint8Array.of(1, 2, 3, 4, 5, 6));
  writer.write(Uint8Array.of(7, 8, 9));
  writer.finish();
  writer.close();
  return new Uint8Array(readFileSync(file));
}

describe('a WAV file whose length is not known beforehand', () => {
  it.each([
    ['short', 'RIFF', undefined],
    ['grown past the size that plain WAV can say', 'RF64', 8],
  ] as const)('%s is %s', async (name, container, mostPlainBytes) => {
    const bytes = write(`${container}-${name}.wav`, mostPlainBytes);
    const { format, dataOffset, dataBytes } = await readWavHeader(bytesSource(bytes));
    expect(format).toEqual({ ...layout, container, frames: 3, extensible: false, warnings: [] });
    expect([...bytes.subarray(dataOffset, dataOffset + dataBytes)]).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9]);
    // Nine bytes of samples are odd and padded.
    expect(bytes.length).toBe(dataOffset + 10);
  });

  it('is never written over another', () => {
    write('once.wav');
    expect(() => write('once.wav')).toThrow('EEXIST');
  });
});
