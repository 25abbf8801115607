import { describe, expect, it } from 'vitest';
import { cueChunks, infoChunk, metadataChunk } from '../../../server/setup/demo-audio/metadata-chunks.ts';
import {
  asciiBytes,
  chunkBytes,
  concatBytes,
  uint32,
  type WavChunk,
} from '../../../shared/audio/wav-envelope.ts';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import type { MetadataField } from '../../../shared/audio/metadata-field.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { readWavMetadata } from '../../../shared/audio/wav-metadata.ts';
import { writeWav } from '../../support/wav/write-wav.ts';

async function fieldsOf(...extraChunks: WavChunk[]): Promise<MetadataField[]> {
  const bytes = writeWav({ sampleRateHz: 48_000, channels: [new Float32Array(10)], extraChunks });
  return readWavMetadata((await readWavHeader(bytesSource(bytes))).metadata);
}

function ixml(xml: string): Promise<MetadataField[]> {
  return fieldsOf({ id: 'iXML', body: new TextEncoder().encode(xml) });
}

describe('texts beside the audio', () => {
  it('a file without any has none', async () => {
    expect(await fieldsOf({ id: 'JUNK', body: new Uint8Array(30) })).toEqual([]);
  });

  it('the fields of a broadcast extension are read and empty ones left out (EBU Tech 3285)', async () => {
    const bext = metadataChunk({
      kind: 'bext',
      description: 'Tank 9',
      originator: '',
      reference: 'REF-1',
      date: '2026-03-04',
      time: '14:22:07',
    });
    new DataView(bext.body.buffer).setBigUint64(338, 48_000n * 3600n, true);
    const history = concatBytes([bext.body, asciiBytes('A=PCM,F=48000\r\n')]);
    expect(await fieldsOf({ id: 'bext', body: history })).toEqual([
      { chunk: 'bext', key: 'Description', value: 'Tank 9' },
      { chunk: 'bext', key: 'OriginatorReference', value: 'REF-1' },
      { chunk: 'bext', key: 'OriginationDate', value: '2026-03-04' },
      { chunk: 'bext', key: 'OriginationTime', value: '14:22:07' },
      { chunk: 'bext', key: 'TimeReference', value: '172800000' },
      { chunk: 'bext', key: 'CodingHistory', value: 'A=PCM,F=48000' },
    ]);
  });

  it('INFO entries are read, odd ones padded', async () => {
    expect(await fieldsOf(infoChunk({ ISFT: 'recorder', IART: 'Ada' }))).toEqual([
      { chunk: 'INFO', key: 'ISFT', value: 'recorder' },
      { chunk: 'INFO', key: 'IART', value: 'Ada' },
    ]);
  });

  it('an INFO entry that claims more than is there gives what is there', async () => {
    const body = concatBytes([asciiBytes('INFOIART'), uint32(0xfffffff0), asciiBytes('Ada')]);
    expect(await fieldsOf({ id: 'LIST', body })).toEqual([{ chunk: 'INFO', key: 'IART', value: 'Ada' }]);
  });

  it('cues are counted and their labels read', async () => {
    expect(
      await fieldsOf(
        ...cueChunks([
          { sample: 3, label: 'click' },
          { sample: 7, label: 'Marker 2' },
        ]),
      ),
    ).toEqual([
      { chunk: 'cue', key: 'marks', value: '2' },
      { chunk: 'adtl', key: 'labl 1', value: 'click' },
      { chunk: 'adtl', key: 'labl 2', value: 'Marker 2' },
    ]);
  });

  it('the text of a labelled span stands behind its five other fields', async () => {
    const span = concatBytes([
      uint32(1),
      uint32(480),
      asciiBytes('rgn '),
      new Uint8Array(8),
      asciiBytes('door\0'),
    ]);
    const body = concatBytes([asciiBytes('adtl'), chunkBytes({ id: 'ltxt', body: span })]);
    expect(await fieldsOf({ id: 'LIST', body })).toEqual([{ chunk: 'adtl', key: 'ltxt 1', value: 'door' }]);
  });

  it('iXML gives the path of each element that holds text', async () => {
    const xml =
      '<?xml version="1.0"?><BWFXML><!-- no --><PROJECT>Ice &amp; salt</PROJECT><NOTE/>' +
      '<TRACK_LIST><TRACK><NAME>left</NAME></TRACK></TRACK_LIST><USER><![CDATA[a <b>]]></USER></BWFXML>';
    expect(await ixml(xml)).toEqual([
      { chunk: 'iXML', key: 'PROJECT', value: 'Ice & salt' },
      { chunk: 'iXML', key: 'TRACK_LIST/TRACK/NAME', value: 'left' },
      { chunk: 'iXML', key: 'USER', value: 'a <b>' },
    ]);
  });

  it('entities of a document type are never expanded', async () => {
    const xml = '<!DOCTYPE x [<!ENTITY a "AAAA"><!ENTITY b "&a;&a;">]><BWFXML><NOTE>&b;&b;</NOTE></BWFXML>';
    const note = (await ixml(xml)).find(({ key }) => key.endsWith('NOTE'));
    expect(note?.value).toBe('&b;&b;');
  });

  it('a billion laughs cost nothing: the fields hold no more characters than the chunk', async () => {
    const laughs = Array.from({ length: 30 }, (_, n) => `<!ENTITY l${n + 1} "${`&l${n};`.repeat(10)}">`);
    const xml = `<?xml version="1.0"?><!DOCTYPE x [<!ENTITY l0 "ha">${laughs.join('')}]><BWFXML><NOTE>&l30;</NOTE></BWFXML>`;
    const fields = await ixml(xml);
    expect(fields.find(({ key }) => key.endsWith('NOTE'))?.value).toBe('&l30;');
    expect(fields.reduce((sum, { value }) => sum + value.length, 0)).toBeLessThan(xml.length);
  });

  it('a megabyte of opening elements ends soon and gives few fields', async () => {
    expect((await ixml('<a>x'.repeat(250_000))).length).toBeLessThanOrEqual(1000);
    expect((await ixml('<'.repeat(1_000_000))).length).toBeLessThanOrEqual(1);
  });

  it('the lines of a guan chunk are read as keys and values', async () => {
    const body = asciiBytes('GUANO|Version: 1.0\nLoc Position: 59.9 10.7\nno colon\n');
    expect(await fieldsOf({ id: 'guan', body })).toEqual([
      { chunk: 'guan', key: 'GUANO|Version', value: '1.0' },
      { chunk: 'guan', key: 'Loc Position', value: '59.9 10.7' },
    ]);
  });

  it('of a tag only the presence is told', async () => {
    expect(await fieldsOf({ id: 'id3 ', body: asciiBytes('ID3 Ada') })).toEqual([
      { chunk: 'id3', key: 'unread', value: '7 bytes' },
    ]);
  });

  it('values are cut to 2,000 characters and carry no control characters', async () => {
    const [field] = await fieldsOf(infoChunk({ ICMT: `a\u0007b\r\n${'x'.repeat(5000)}` }));
    expect(field!.value).toHaveLength(1999);
    expect(field!.value.slice(0, 5)).toBe('a b x');
  });
});
