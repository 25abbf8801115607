import { describe, expect, it } from 'vitest';
import wavDecoder from 'wav-decoder';
import { decodeWithWavDecoder } from '../../../server/measuring/small-recording.ts';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { decodeFrames } from '../../../shared/audio/pcm-decode.ts';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';
import { readWavMetadata } from '../../../shared/audio/wav-metadata.ts';
import { fixtureBytes, fixtureNames, formatFixture } from '../../support/wav/format-fixtures.ts';

const wavNames = fixtureNames(/^(sox|ff)-.*\.wav$/);

/** Format tag 0xFFFE in a dump of the file. */
const extensible = [
  'sox-s24.wav',
  'sox-s32.wav',
  'sox-s24-3ch.wav',
  'sox-s24-odd.wav',
  'ff-s24-extensible.wav',
  'ff-s32-extensible.wav',
  'ff-s16-6ch.wav',
  'ff-s24-8ch.wav',
  'ff-f32.wav',
  'ff-rf64-f32.wav',
  'ff-f64-4ch.wav',
  'ff-rf64-s24.wav',
];
const warnings: Record<string, string[]> = {
  'ff-pipe.wav': [
    'The header does not say how much audio follows, as when a recorder is cut off; everything up to the end of the file was taken.',
  ],
};

function headerOf(bytes: Uint8Array): Promise<WavHeader> {
  return readWavHeader(bytesSource(bytes));
}

function decoded(bytes: Uint8Array, { format, dataOffset, dataBytes }: WavHeader): Float32Array[] {
  const out = Array.from({ length: format.channels }, () => new Float32Array(format.frames));
  const { nonFiniteSamples } = decodeFrames(bytes.subarray(dataOffset, dataOffset + dataBytes), format, out);
  expect(nonFiniteSamples.every((count) => count === 0)).toBe(true);
  return out;
}

describe('WAV files of other programs', () => {
  it('are of every encoding that is read', () => {
    const met = new Set(
      wavNames.map((name) => {
        const { encoding, bitsPerSample } = formatFixture(name);
        return `${encoding} ${bitsPerSample}`;
      }),
    );
    expect([...met].sort()).toEqual([
      'float 32',
      'float 64',
      'integer 16',
      'integer 24',
      'integer 32',
      'integer 8',
    ]);
  });

  it.each(wavNames)('%s: its header says what ffprobe says', async (name) => {
    const fixture = formatFixture(name);
    const { format } = await headerOf(fixture.bytes);
    expect(format).toEqual({
      container: name.includes('rf64') ? 'RF64' : 'RIFF',
      encoding: fixture.encoding,
      bitsPerSample: fixture.bitsPerSample,
      channels: fixture.channels,
      sampleRateHz: fixture.sampleRateHz,
      frames: fixture.samples[0]!.length,
      extensible: extensible.includes(name),
      warnings: warnings[name] ?? [],
    });
    expect(fixture.frames).toBe(format.frames);
  });

  it.each(wavNames)('%s: every sample is the one that the other program decodes', async (name) => {
    const { bytes, samples } = formatFixture(name);
    const header = await headerOf(bytes);
    expect(decoded(bytes, header)).toEqual(samples.map((channel) => Float32Array.from(channel)));
  });

  it.each(wavNames)('%s: wav-decoder, behind a header of ours, gives the same samples', async (name) => {
    const { bytes, samples } = formatFixture(name);
    const { format, dataOffset, dataBytes } = await headerOf(bytes);
    const small = decodeWithWavDecoder(bytes.subarray(dataOffset, dataOffset + dataBytes), format);
    expect(small).toEqual(samples.map((channel) => Float32Array.from(channel)));
  });

  it('wav-decoder alone cannot read the extensible ones and RF64, which is why it never sees the header', () => {
    const refused = wavNames.filter((name) => {
      try {
        wavDecoder.decode.sync(fixtureBytes(name).buffer, { symmetric: true });
        return false;
      } catch {
        return true;
      }
    });
    expect(refused.sort()).toEqual([...extensible].sort());
  });

  it.each([
    ['ff-bext.wav', 'bext', 'Originator', 'A. Person'],
    ['ff-bext.wav', 'bext', 'Description', 'basin two'],
    ['ff-bext.wav', 'bext', 'TimeReference', '480'],
    ['ff-info.wav', 'INFO', 'IART', 'A. Person'],
    ['ff-info.wav', 'INFO', 'INAM', 'freeze 4'],
  ])('%s: the field %s/%s that the other program wrote is found', async (name, chunk, key, value) => {
    const { metadata } = await headerOf(fixtureBytes(name));
    const fields = readWavMetadata(metadata);
    expect(fields).toContainEqual({ chunk, key, value });
    const findings = personalMetadata(fields).map((finding) => finding.key);
    expect(findings.includes(key)).toBe(key !== 'TimeReference');
  });
});

describe('files that are not what their ending says, or hold coded samples', () => {
  it.each([
    ['refused-adpcm_ima_wav.wav', 'compressed', 'IMA ADPCM'],
    ['refused-adpcm_ms.wav', 'compressed', 'Microsoft ADPCM'],
    ['refused-gsm.wav', 'compressed', 'GSM 6.10'],
    ['refused-pcm_alaw.wav', 'compressed', 'A-law'],
    ['refused-pcm_mulaw.wav', 'compressed', 'mu-law'],
    ['refused-rifx.wav', 'big-endian', 'big-endian WAV file'],
    ['renamed-aiff.wav', 'other-audio', 'an AIFF file'],
    ['renamed-au.wav', 'other-audio', 'an AU file'],
    ['renamed-caf.wav', 'other-audio', 'a Core Audio file'],
    ['renamed-m4a.wav', 'other-audio', 'an M4A file'],
    ['renamed-mka.wav', 'other-audio', 'a Matroska or WebM film'],
    ['renamed-mov.wav', 'film', 'a QuickTime film'],
    ['renamed-mp3.wav', 'other-audio', 'an MP3 file'],
    ['renamed-ogg.wav', 'other-audio', 'an Ogg file'],
    ['renamed-png.wav', 'not-audio', 'a PNG picture'],
    ['renamed-w64.wav', 'other-audio', 'a Wave64 file'],
    ['renamed-zip.wav', 'not-audio', 'a ZIP archive'],
  ])('%s is refused and named', async (name, code, words) => {
    const refused: unknown = await headerOf(fixtureBytes(name)).catch((error: unknown) => error);
    expect(refused).toMatchObject({ name: 'RefusedFileError', code });
    expect((refused as Error).message).toContain(words);
  });

  it('all of them are in this list', () => {
    expect(fixtureNames(/^(refused|renamed)-/)).toHaveLength(17);
  });
});
