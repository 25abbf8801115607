import { describe, expect, it } from 'vitest';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { readCaptureSet } from '../../../shared/audio/capture-set.ts';
import { asciiBytes } from '../../../shared/audio/wav-envelope.ts';
import { readZipDirectory } from '../../../shared/audio/zip-directory.ts';
import { fixtureBytes } from '../../support/wav/format-fixtures.ts';
import { countingSource } from '../../support/wav/counting-source.ts';
import { writeWav, type WriteWavInput } from '../../support/wav/write-wav.ts';
import { writeZip, type ZipFile } from '../../support/wav/write-zip.ts';
import { importFolder } from './imported.ts';

const { bring } = importFolder();

const rate = 1_000_000;

function segment(values: number[], facts: Partial<WriteWavInput> = {}): Uint8Array {
  return writeWav({ sampleRateHz: rate, channels: [Float32Array.from(values)], ...facts });
}

const manifest = {
  kind: 'capture-set',
  version: 1,
  liveTimeNs: 3_600_000_000_000,
  segments: [
    { file: 'a.wav', startNs: 1_000_000, preTriggerFrames: 1 },
    { file: 'b.wav', startNs: 9_000_000_000, preTriggerFrames: null },
  ],
};

function setOf(changes: object = {}, files: ZipFile[] = []): Uint8Array {
  const own = [
    { name: 'captures.json', bytes: asciiBytes(JSON.stringify({ ...manifest, ...changes })) },
    { name: 'b.wav', bytes: segment([-0.5, 0.125]) },
    { name: 'a.wav', bytes: segment([0.25, 0.5, 0.75]) },
  ];
  const given = files.map(({ name }) => name);
  return writeZip([...own.filter(({ name }) => !given.includes(name)), ...files]);
}

describe('a capture set', () => {
  it('gives its segments one after the other, in the order of the manifest', async () => {
    const { format, samples } = await bring(setOf(), { layout: null });
    expect([...samples[0]!]).toEqual([0.25, 0.5, 0.75, -0.5, 0.125]);
    expect(format).toMatchObject({
      container: 'capture-set',
      frames: 5,
      sampleRateHz: rate,
      bitsPerSample: 16,
    });
    expect(format.warnings).toEqual([
      'A capture set of 2 segments, which stand one after the other here: the time between them was not recorded, and a jump where two meet is no sound.',
    ]);
  });

  it('tells where each segment lies and when it was taken', async () => {
    const { segments, liveTimeNs } = await readCaptureSet(bytesSource(setOf()));
    expect(liveTimeNs).toBe(3_600_000_000_000);
    expect(segments).toEqual([
      { startFrame: 0, frames: 3, startNs: 1_000_000, preTriggerFrames: 1 },
      { startFrame: 3, frames: 2, startNs: 9_000_000_000, preTriggerFrames: null },
    ]);
  });

  it('is read with sizes in 64 bits', async () => {
    const wide = ['a.wav', 'b.wav'].map((name) => ({ name, bytes: segment([0.5, 0.5]), isWide: true }));
    const { segments } = await readCaptureSet(bytesSource(setOf({}, wide)));
    expect(segments.map(({ frames }) => frames)).toEqual([2, 2]);
  });

  it('carries the names in the headers of its segments to the privacy screen', async () => {
    const named = segment([0.5], {
      extraChunks: [{ id: 'LIST', body: asciiBytes('INFOIART\x04\0\0\0Ada\0') }],
    });
    const { metadata } = await readCaptureSet(bytesSource(setOf({}, [{ name: 'b.wav', bytes: named }])));
    expect(metadata).toEqual([{ chunk: 'INFO', key: 'IART', value: 'Ada' }]);
  });

  it('packed by another program is read', async () => {
    // fixtures/formats/make.sh packs one with zip -0.
    const { segments, format } = await readCaptureSet(bytesSource(fixtureBytes('captures.zip')));
    expect(format).toMatchObject({ sampleRateHz: 500_000, channels: 3 });
    expect(segments.map(({ frames, startNs }) => [frames, startNs])).toEqual([
      [240, 0],
      [240, 5_000_000],
    ]);
  });
});

describe('a capture set that is refused', () => {
  const [first, second] = manifest.segments;
  it.each<[string, Uint8Array, RegExp]>([
    [
      'an archive without manifest',
      writeZip([{ name: 'a.wav', bytes: segment([1]) }]),
      /a file captures\.json/,
    ],
    [
      'a manifest that is no JSON',
      setOf({}, [{ name: 'captures.json', bytes: asciiBytes('{') }]),
      /is no JSON/,
    ],
    ['another version', setOf({ version: 2 }), /not as it should be, at "version"/],
    ['a field that nobody knows', setOf({ place: 'cellar' }), /not as it should be/],
    ['no segments', setOf({ segments: [] }), /at "segments"/],
    [
      'a file that is missing',
      setOf({ segments: [{ ...first, file: 'c.wav' }] }),
      /The file c\.wav is not in/,
    ],
    [
      'a compressed file',
      setOf({}, [{ name: 'a.wav', bytes: segment([1]), method: 8 }]),
      /without compression/,
    ],
    ['a segment that is no WAV file', setOf({}, [{ name: 'a.wav', bytes: asciiBytes('ID3\x03') }]), /MP3/],
    [
      'another rate',
      setOf({}, [{ name: 'b.wav', bytes: segment([1], { sampleRateHz: 48_000 }) }]),
      /another rate/,
    ],
    ['times that overlap', setOf({ segments: [first, { ...second, startNs: 1_001_000 }] }), /begins before/],
    ['times in another order', setOf({ segments: [second, first] }), /begins before/],
    [
      'a trigger behind its end',
      setOf({ segments: [{ ...first, preTriggerFrames: 3 }] }),
      /before its trigger/,
    ],
    [
      'a segment cut short',
      setOf({}, [{ name: 'a.wav', bytes: segment([1, 1, 1]).slice(0, -2) }]),
      /not whole/,
    ],
    ['an archive cut short', setOf().slice(0, -30), /damaged or cut short/],
  ])('%s', async (_, bytes, sentence) => {
    const refused: unknown = await bring(bytes, { layout: null }).catch((error: unknown) => error);
    expect(refused).toMatchObject({ name: 'RefusedFileError' });
    expect((refused as Error).message).toMatch(sentence);
    expect((refused as Error).message).toMatch(/^[A-Z].*\.$/i);
  });

  it('files that share bytes claim more than the archive has, and nothing is read of them', async () => {
    const bytes = setOf();
    const view = new DataView(bytes.buffer);
    // The sizes of the first central header, found by its signature (APPNOTE 4.3.12).
    const at = Buffer.from(bytes).indexOf(Buffer.from('PK\x01\x02', 'latin1'));
    view.setUint32(at + 24, 1_000_000, true);
    const source = countingSource(bytes);
    await expect(readZipDirectory(source, 1 << 20)).rejects.toMatchObject({ code: 'damaged' });
    expect(source.bytesRead()).toBeLessThan(2 * bytes.length);
  });

  it('every archive with one byte changed ends in a set or in a refusal', async () => {
    const sound = setOf();
    for (let at = 0; at < sound.length; at++) {
      const bytes = sound.slice();
      bytes[at]! ^= 0x81;
      const outcome = await readCaptureSet(countingSource(bytes)).then(
        () => 'RefusedFileError',
        (error: unknown) => (error as Error).name,
      );
      expect([at, outcome]).toEqual([at, 'RefusedFileError']);
    }
  });
});
