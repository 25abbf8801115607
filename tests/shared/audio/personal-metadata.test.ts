import { describe, expect, it } from 'vitest';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';

describe('fields that could name a person or a place', () => {
  it.each([
    ['INFO', 'IART', 'Ada Example', 'person'],
    ['INFO', 'IENG', 'Ada Example', 'person'],
    ['INFO', 'ITCH', 'Ada Example', 'person'],
    ['INFO', 'ICMT', 'with Ada in the cellar', 'free-text'],
    ['INFO', 'IARL', 'Cellar archive', 'place'],
    ['bext', 'Originator', 'Ada Example', 'person'],
    ['bext', 'OriginatorReference', 'AE-0001', 'person'],
    ['bext', 'Description', 'Second freeze', 'free-text'],
    ['iXML', 'USER', 'Ada', 'person'],
    ['iXML', 'NOTE', 'Ada knocks', 'free-text'],
    ['iXML', 'LOCATION/LOCATION_GPS', '59.9, 10.7', 'place'],
    ['iXML', 'BEXT/BWF_ORIGINATOR', 'Ada', 'person'],
    ['guan', 'Loc Position', '59.9 10.7', 'place'],
    ['adtl', 'labl 1', 'Ada speaks', 'free-text'],
    ['id3', 'unread', '120 bytes', 'unread'],
    ['_PMX', 'unread', '120 bytes', 'unread'],
    ['iXML', 'unread', '90000 bytes', 'unread'],
    // Whatever the field is for, its text gives it away.
    ['INFO', 'ISFT', 'recorder of ada@example.org', 'person'],
    ['bext', 'CodingHistory', '/home/ada/freeze.wav', 'person'],
    ['iXML', 'FILE_NAME', 'C:\\Users\\ada\\x.wav', 'person'],
    ['xyzw', 'text', 'at 59.91386, 10.75224', 'place'],
  ])('%s %s "%s" is a finding (%s)', (chunk, key, value, kind) => {
    const [finding, ...rest] = personalMetadata([{ chunk, key, value }]);
    expect(rest).toEqual([]);
    expect(finding).toMatchObject({ chunk, key, value, kind });
    expect(finding!.sentence).toMatch(/^The f.*\.$/);
  });

  it.each([
    ['INFO', 'ISFT', 'bench recorder 2.1'],
    ['INFO', 'ICRD', '2026-02-11'],
    ['INFO', 'IART', '   '],
    ['bext', 'OriginationDate', '2026-03-04'],
    ['bext', 'OriginationTime', '14:22:07'],
    ['bext', 'TimeReference', '172800000'],
    ['bext', 'CodingHistory', 'A=PCM,F=48000,W=24,M=mono'],
    ['iXML', 'SPEED/FILE_SAMPLE_RATE', '192000'],
    ['cue', 'marks', '4'],
    ['adtl', 'labl 1', 'Marker 01'],
    ['adtl', 'labl 2', '17'],
    ['abcd', 'unread', '30 bytes'],
  ])('%s %s "%s" is none', (chunk, key, value) => {
    expect(personalMetadata([{ chunk, key, value }])).toEqual([]);
  });

  it('a sentence shows a long value shortened', () => {
    const [finding] = personalMetadata([{ chunk: 'INFO', key: 'ICMT', value: 'x'.repeat(2000) }]);
    expect(finding!.sentence.length).toBeLessThan(250);
  });
});
