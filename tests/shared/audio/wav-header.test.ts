import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { asciiBytes, chunkBytes, concatBytes, uint32 } from '../../../shared/audio/wav-envelope.ts';
import { blobSource, bytesSource } from '../../../shared/audio/byte-source.ts';
import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';
import { countingSource } from '../../support/wav/counting-source.ts';
import { chunkOffset, withUint16, withUint32 } from '../../support/wav/patch-bytes.ts';
import { writeWav, type WriteWavInput } from '../../support/wav/write-wav.ts';

const FRAMES = 100;

function silence(channels: number, frames = FRAMES): Float32Array[] {
  return Array.from({ length: channels }, () => new Float32Array(frames));
}

function wav(input: Partial<WriteWavInput> = {}): Uint8Array {
  return writeWav({ sampleRateHz: 48_000, channels: silence(1), ...input });
}

function header(bytes: Uint8Array): Promise<WavHeader> {
  return readWavHeader(bytesSource(bytes));
}

const WIDTHS = [
  { encoding: 'integer', bitsPerSample: 8 },
  { encoding: 'integer', bitsPerSample: 16 },
  { encoding: 'integer', bitsPerSample: 24 },
  { encoding: 'integer', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 32 },
  { encoding: 'float', bitsPerSample: 64 },
] as const;

describe('what a header says', () => {
  for (const width of WIDTHS) {
    for (const extensible of [false, true]) {
      it(`${width.encoding} samples of ${width.bitsPerSample} bits are read${extensible ? ' from an extensible header' : ''}`, async () => {
        const bytes = wav({ ...width, extensible, channels: silence(3), sampleRateHz: 192_000 });
        const read = await header(bytes);
        const blockAlign = (3 * width.bitsPerSample) / 8;
        expect(read.format).toEqual({
          container: 'RIFF',
          ...width,
          channels: 3,
          sampleRateHz: 192_000,
          frames: FRAMES,
          extensible,
          warnings: [],
        });
        expect(read.blockAlign).toBe(blockAlign);
        expect(read.dataOffset).toBe(extensible ? 68 : 44);
        expect(read.dataBytes).toBe(FRAMES * blockAlign);
        expect(read.metadata).toEqual([]);
      });
    }
  }

  it('any accepted format survives writing and reading, wherever other chunks stand', async () => {
    const chunk = fc.record({
      id: fc.constantFrom('JUNK', 'abcd', 'LIST', 'PEAK', 'bext'),
      body: fc.uint8Array({ maxLength: 41 }),
    });
    const input = fc.record({
      width: fc.constantFrom(...WIDTHS),
      container: fc.constantFrom('RIFF', 'RF64', 'BW64'),
      extensible: fc.boolean(),
      channels: fc.integer({ min: 1, max: 64 }),
      frames: fc.integer({ min: 1, max: 40 }),
      sampleRateHz: fc.integer({ min: 1, max: 20_000_000 }),
      extraChunks: fc.array(chunk, { maxLength: 5 }),
      chunksAfter: fc.array(chunk, { maxLength: 3 }),
    });
    await fc.assert(
      fc.asyncProperty(input, async ({ width, channels, frames, ...rest }) => {
        const { format } = await header(wav({ ...width, ...rest, channels: silence(channels, frames) }));
        const { container, extensible, sampleRateHz } = rest;
        expect(format).toEqual({
          ...width,
          container,
          extensible,
          sampleRateHz,
          channels,
          frames,
          warnings: [],
        });
      }),
      { numRuns: 300, seed: 7 },
    );
  });

  it('a File in the browser is read by slices', async () => {
    const read = await readWavHeader(
      blobSource(new Blob([writeWav({ sampleRateHz: 96_000, channels: silence(2) })])),
    );
    expect(read.format.frames).toBe(FRAMES);
  });

  it('valid bits below the width are kept and told', async () => {
    const read = await header(wav({ bitsPerSample: 32, extensible: true, validBits: 24 }));
    expect(read.validBits).toBe(24);
    expect(read.format.bitsPerSample).toBe(32);
    expect(read.format.warnings).toEqual([
      'Only 24 of the 32 bits of each sample carry signal, as the header says.',
    ]);
  });

  it('the first format chunk and the first data chunk count', async () => {
    const second = wav({ sampleRateHz: 8_000, channels: silence(2, 7) }).subarray(12);
    const read = await header(concatBytes([wav(), second]));
    expect(read.format).toMatchObject({ sampleRateHz: 48_000, channels: 1, frames: FRAMES });
    expect(read.format.warnings).toHaveLength(2);
  });

  it('a chunk of odd size is followed by a pad byte', async () => {
    const read = await header(wav({ extraChunks: [{ id: 'abcd', body: new Uint8Array(7) }] }));
    expect(read.format.warnings).toEqual([]);
    expect(read.metadata).toMatchObject([{ id: 'abcd', sizeBytes: 7 }]);
  });

  it('a missing pad byte is bridged with a warning', async () => {
    const bytes = wav({ extraChunks: [{ id: 'abcd', body: new Uint8Array(7) }] });
    const padAt = chunkOffset(bytes, 'abcd') + 8 + 7;
    const read = await header(concatBytes([bytes.subarray(0, padAt), bytes.subarray(padAt + 1)]));
    expect(read.format.frames).toBe(FRAMES);
    expect(read.format.warnings).toEqual([
      'The chunk "abcd" has an odd size and lacks the byte that must follow it.',
    ]);
  });

  it('a format chunk after the data is found', async () => {
    const bytes = wav();
    const fmt = bytes.subarray(12, 36);
    const data = bytes.subarray(36);
    const read = await header(concatBytes([bytes.subarray(0, 12), data, fmt]));
    expect(read.format.frames).toBe(FRAMES);
    expect(read.dataOffset).toBe(20);
  });

  it('a wrong byte rate is told and not used', async () => {
    const read = await header(withUint32(wav(), 28, 1));
    expect(read.format.warnings).toEqual([
      "The header's byte rate is 1; its other fields make 96000, which was used.",
    ]);
  });

  it('what follows the audio and is no chunk is left alone with a warning', async () => {
    const read = await header(concatBytes([wav(), Uint8Array.from([1, 2, 3, 4, 5, 6, 7, 8, 9])]));
    expect(read.format.frames).toBe(FRAMES);
    expect(read.format.warnings).toEqual([
      'After the audio 9 B follow that are no part of a WAV file; they were left alone.',
    ]);
  });

  it('a text chunk is read to its first megabyte, whatever it claims', async () => {
    const bytes = wav({ chunksAfter: [{ id: 'iXML', body: new Uint8Array(3_000_000).fill(0x41) }] });
    const source = countingSource(bytes);
    const read = await readWavHeader(source);
    expect(read.metadata[0]).toMatchObject({ id: 'iXML', sizeBytes: 3_000_000 });
    expect(read.metadata[0]!.bytes).toHaveLength(1024 * 1024);
    expect(read.format.warnings).toEqual(['Of the metadata chunk "iXML" 1.0 MB of 3.0 MB could be read.']);
    expect(source.bytesRead()).toBeLessThan(1_100_000);
  });

  it('all text chunks together are read to four megabytes', async () => {
    const body = new Uint8Array(1024 * 1024).fill(0x41);
    const read = await header(wav({ chunksAfter: Array.from({ length: 6 }, () => ({ id: 'iXML', body })) }));
    const total = read.metadata.reduce((sum, chunk) => sum + chunk.bytes.length, 0);
    expect(total).toBe(4 * 1024 * 1024);
  });
});

describe('sizes that do not fit the file', () => {
  it('an RF64 file of more than 4 GB takes its sizes from ds64', async () => {
    const frames = 3_000_000_000;
    const bytes = wav({ container: 'RF64' });
    const view = new DataView(bytes.buffer);
    // EBU Tech 3306, 3.3: the data size is the second 64-bit field of ds64, whose body begins at byte 20.
    view.setBigUint64(20 + 8, BigInt(frames * 2), true);
    const read = await readWavHeader(countingSource(bytes, 80 + frames * 2));
    expect(read.format).toMatchObject({ container: 'RF64', frames, warnings: [] });
    expect(read.dataBytes).toBe(6_000_000_000);
    expect(read.dataOffset).toBe(80);
  });

  it('a plain WAV file past 4 GB whose size field has wrapped is taken to its end', async () => {
    const dataBytes = 2 ** 32 + 2000;
    const read = await readWavHeader(countingSource(withUint32(wav(), 40, 2000), 44 + dataBytes));
    expect(read.dataBytes).toBe(dataBytes);
    expect(read.format.warnings).toHaveLength(1);
  });

  for (const [name, sizeField] of [
    ['0', 0],
    ['all ones', 0xffffffff],
  ] as const) {
    it(`a data size of ${name} with samples behind it goes to the end of the file with a warning`, async () => {
      const read = await header(withUint32(wav(), 40, sizeField));
      expect(read.dataBytes).toBe(200);
      expect(read.format.warnings).toEqual([
        'The header does not say how much audio follows, as when a recorder is cut off; everything up to the end of the file was taken.',
      ]);
    });
  }

  it('an RF64 file whose ds64 was never filled in goes to the end of the file', async () => {
    const bytes = wav({ container: 'RF64' });
    new DataView(bytes.buffer).setBigUint64(28, 0n, true);
    const read = await header(bytes);
    expect(read.format.frames).toBe(FRAMES);
    expect(read.format.warnings).toHaveLength(1);
  });

  it('a file cut short gives its whole frames and tells how much is missing', async () => {
    const bytes = wav({ channels: silence(2) });
    const read = await header(bytes.subarray(0, bytes.length - 101));
    expect(read.format.frames).toBe(74);
    expect(read.dataBytes).toBe(296);
    expect(read.format.warnings).toEqual([
      'The file is cut short: 101 B of audio are missing (25 % of what its header says). The 74 whole frames that are there were taken.',
    ]);
  });

  it('an incomplete last frame is left out with a warning', async () => {
    const read = await header(withUint32(wav({ channels: silence(2) }), 40, 399));
    expect(read.format.frames).toBe(99);
    expect(read.format.warnings[0]).toContain('its last 3 bytes were left out');
  });
});

describe('what is refused, and in which words', () => {
  const text = 'time,volts\n0,0.1\n1,0.2\n';
  const first = (bytes: number[] | string): Uint8Array =>
    concatBytes([typeof bytes === 'string' ? asciiBytes(bytes) : Uint8Array.from(bytes), new Uint8Array(64)]);
  const table: [what: string, bytes: Uint8Array, code: string, words: string][] = [
    ['an empty file', new Uint8Array(0), 'empty', 'is empty'],
    ['an MP3 file with a tag', first('ID3\x03'), 'other-audio', 'an MP3 file'],
    ['an MP3 file without a tag', first([0xff, 0xfb, 0x90, 0x64]), 'other-audio', 'an MP3 file'],
    ['an Ogg file', first('OggS'), 'other-audio', 'an Ogg file'],
    ['an MP4 film', first('\0\0\0\x18ftypisom'), 'film', 'an MP4 film'],
    ['a QuickTime film', first('\0\0\0\x14ftypqt  '), 'film', 'a QuickTime film'],
    ['an AVI film', first('RIFF\0\x01\0\0AVI '), 'other-audio', 'an AVI film'],
    ['an AIFF file', first('FORM\0\0\0\x10AIFF'), 'other-audio', 'an AIFF file'],
    ['a PNG picture', first('\x89PNG\r\n\x1a\n'), 'not-audio', 'a PNG picture'],
    ['a ZIP archive', first('PK\x03\x04'), 'not-audio', 'a ZIP archive'],
    ['a PDF document', first('%PDF-1.7'), 'not-audio', 'a PDF document'],
    ['a web page', asciiBytes('<!DOCTYPE html><title>x</title>'), 'not-audio', 'a web page'],
    ['a text file', asciiBytes(text), 'text', 'a text file'],
    ['anything else', first([1, 2, 3, 4]), 'unknown', 'neither WAV nor FLAC'],
    ['samples of -1, which begin like MP3', first([0xff, 0xff, 0xff, 0xff]), 'unknown', 'Raw samples'],
    ['a file of three bytes', Uint8Array.from([0x52, 0x49, 0x46]), 'unknown', 'neither WAV nor FLAC'],
    ['a big-endian WAV file', first('RIFX\0\0\x01\0WAVE'), 'big-endian', 'big-endian'],
    ['A-law', withUint16(wav(), 20, 6), 'compressed', 'coded with A-law'],
    ['mu-law', withUint16(wav(), 20, 7), 'compressed', 'coded with mu-law'],
    ['Microsoft ADPCM', withUint16(wav(), 20, 2), 'compressed', 'coded with Microsoft ADPCM'],
    ['IMA ADPCM', withUint16(wav(), 20, 0x11), 'compressed', 'coded with IMA ADPCM'],
    ['MP3 inside WAV', withUint16(wav(), 20, 0x55), 'compressed', 'coded with MP3'],
    ['an unknown coding', withUint16(wav(), 20, 0x1234), 'compressed', 'format tag 0x1234'],
    ['A-law in an extensible header', withUint16(wav({ extensible: true }), 44, 6), 'compressed', 'A-law'],
    ['a foreign sub-format', withUint16(wav({ extensible: true }), 46, 9), 'compressed', 'sub-format'],
    ['an extension cut off', withUint16(wav(), 20, 0xfffe), 'broken-format', 'extension is missing'],
    ['integers of 12 bits', withUint16(wav(), 34, 12), 'width', 'integer samples of 12 bits'],
    ['integers of 20 bits', withUint16(wav(), 34, 20), 'width', 'integer samples of 20 bits'],
    ['integers of 64 bits', withUint16(wav(), 34, 64), 'width', 'integer samples of 64 bits'],
    ['floats of 16 bits', withUint16(wav(), 20, 3), 'width', 'float samples of 16 bits'],
    [
      'more valid bits than bits',
      wav({ extensible: true, validBits: 17 }),
      'width',
      '17 bits of each sample',
    ],
    ['no channel', withUint16(wav(), 22, 0), 'channels', '0 channels'],
    ['65 channels', withUint16(wav(), 22, 65), 'channels', '65 channels'],
    ['a rate of 0', withUint32(wav(), 24, 0), 'rate', '0 Hz'],
    ['a rate above 20 MHz', withUint32(wav(), 24, 20_000_001), 'rate', '20 MHz'],
    ['a wrong block align', withUint16(wav(), 32, 3), 'block-align', 'contradicts itself'],
    ['a format chunk of 14 bytes', shortFormat(), 'broken-format', 'has 14 bytes'],
    ['no format chunk', withoutChunk('fmt '), 'no-format', 'no format chunk'],
    ['no data chunk', withoutChunk('data'), 'no-data', 'no audio in it'],
    ['no frames', wav({ channels: silence(1, 0) }), 'no-frames', 'not a single whole frame'],
    ['an empty data chunk before other chunks', emptyBeforeList(), 'no-frames', 'not a single whole frame'],
    ['half a frame', wav({ channels: silence(4) }).subarray(0, 47), 'no-frames', 'not a single whole frame'],
    ['a header alone', asciiBytes('RIFF\0\0\0\0WAVE'), 'no-format', 'no format chunk'],
    ['a list of chunks that breaks off', brokenList(), 'no-format', 'breaks off at byte 12'],
    ['ten thousand chunks without audio', manyChunks(), 'too-many-chunks', 'first 10,000 chunks'],
  ];

  function shortFormat(): Uint8Array {
    return concatBytes([
      asciiBytes('RIFF\0\0\0\0WAVE'),
      chunkBytes({ id: 'fmt ', body: new Uint8Array(14) }),
    ]);
  }

  function withoutChunk(id: string): Uint8Array {
    const bytes = wav().slice();
    bytes.set(asciiBytes('JUNK'), chunkOffset(bytes, id));
    return bytes;
  }

  function emptyBeforeList(): Uint8Array {
    return wav({
      channels: silence(1, 0),
      chunksAfter: [{ id: 'LIST', body: asciiBytes('INFOICRD\x04\0\0\x002026') }],
    });
  }

  function brokenList(): Uint8Array {
    return concatBytes([asciiBytes('RIFF\0\0\0\0WAVE'), new Uint8Array(40)]);
  }

  function manyChunks(): Uint8Array {
    const chunk = concatBytes([asciiBytes('abcd'), uint32(0)]);
    return concatBytes([asciiBytes('RIFF\0\0\0\0WAVE'), ...Array.from({ length: 10_001 }, () => chunk)]);
  }

  for (const [what, bytes, code, words] of table) {
    it(`${what} is refused in words`, async () => {
      const refused: unknown = await header(bytes).catch((error: unknown) => error);
      expect(refused).toMatchObject({ name: 'RefusedFileError', code });
      const { message } = refused as Error;
      expect(message).toContain(words);
      expect(message).toMatch(/^[A-Z].*\.$/);
    });
  }
});
