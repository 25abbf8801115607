import { describe, expect, it } from 'vitest';
import { readRecordingFile } from '@/composables/uploads/read-recording-file.ts';
import { writeWav } from '../../support/wav/write-wav.ts';

describe('reading a chosen file', () => {
  it('tells the format from its header', async () => {
    const bytes = writeWav({ sampleRateHz: 192_000, channels: [new Float32Array(1920)] });
    const outcome = await readRecordingFile(new Blob([bytes]));
    expect(outcome).toMatchObject({
      reading: { format: { sampleRateHz: 192_000, frames: 1920, bitsPerSample: 16 }, findings: [] },
    });
  });

  it('gives the sentence of the refusal for what is no WAV file', async () => {
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
    });
  });
});
