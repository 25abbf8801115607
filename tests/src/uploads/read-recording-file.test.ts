import { describe, expect, it } from 'vitest';
import { readRecordingFile } from '@/composables/uploads/read-recording-file.ts';
import { fixtureBytes } from '../../support/wav/format-fixtures.ts';
import { writeWav } from '../../support/wav/write-wav.ts';

describe('reading a chosen file', () => {
  it('tells the format from its header', async () => {
    const bytes = writeWav({ sampleRateHz: 192_000, channels: [new Float32Array(1920)] });
    const outcome = await readRecordingFile(new Blob([bytes]));
    expect(outcome).toMatchObject({
      reading: { format: { sampleRateHz: 192_000, frames: 1920, bitsPerSample: 16 }, findings: [] },
    });
  });

  it('tells the format of FLAC from its stream info', async () => {
    const outcome = await readRecordingFile(new Blob([fixtureBytes('sox-1mhz.flac')]));
    expect(outcome).toMatchObject({
      reading: { format: { container: 'FLAC', sampleRateHz: 1_000_000, frames: 300 } },
    });
  });

  it('tells what a file could be whose samples nobody has described yet', async () => {
    const samples = new Blob([new Uint8Array(Float32Array.of(0.1, 0.2, 0.3, 0.4).buffer)]);
    expect(await readRecordingFile(samples)).toMatchObject({ undeclared: { kind: 'raw', firstLines: [] } });
    expect(await readRecordingFile(new Blob(['0,1\n1,2\n']))).toMatchObject({
      undeclared: { kind: 'CSV', firstLines: ['0,1', '1,2', ''] },
    });
    expect(await readRecordingFile(new Blob(['%PDF-1.7']))).toMatchObject({ undeclared: null });
    const layout = {
      kind: 'raw',
      encoding: 'float',
      bitsPerSample: 32,
      byteOrder: 'little',
      channels: 2,
      sampleRateHz: 500_000,
      headerBytes: 0,
    } as const;
    expect(await readRecordingFile(samples, layout)).toMatchObject({
      reading: { format: { container: 'raw', frames: 2 } },
    });
  });

  it('gives the sentence of the refusal for what is no recording', async () => {
    const outcome = await readRecordingFile(new Blob([new Uint8Array(600)]));
    expect(outcome).toHaveProperty('refusal');
    expect('refusal' in outcome && outcome.refusal).toMatch(/\.$/);
  });

  it('gives a sentence where the browser cannot read it at all', async () => {
    const broken = new Blob([new Uint8Array(600)]);
    broken.slice = () => {
      throw new DOMException('gone', 'NotReadableError');
    };
    expect(await readRecordingFile(broken)).toEqual({
      refusal: 'The browser could not read this file. It may have been moved or changed.',
      undeclared: null,
    });
  });
});
