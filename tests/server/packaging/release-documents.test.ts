import { readFileSync } from 'node:fs';
import { Ajv, type ValidateFunction } from 'ajv';
import addFormats from 'ajv-formats';
import { parse as parseCsv } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { parse as parseYaml } from 'yaml';
import { citationText } from '../../../server/packaging/documents/citation.ts';
import { releaseDocuments } from '../../../server/packaging/release-documents.ts';
import { releaseContents } from '../../../server/packaging/release-tables.ts';
import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { requiredBump } from '../../../shared/domain/release-version.ts';
import { makeSnapshot, sha256Hex } from './snapshot-fixture.ts';
import {
  foreignKeyFaults,
  tableFaults,
  type ReadTable,
  type SchemaDescriptor,
} from './table-schema-check.ts';

const profiles = ['data-package', 'data-resource', 'table-schema', 'table-dialect', 'citation-file'];

function loadProfiles(): Ajv {
  const ajv = new Ajv({ strict: true, strictRequired: false, strictTypes: false, allErrors: true });
  addFormats.default(ajv);
  for (const name of profiles) {
    const url = new URL(`../../../fixtures/profiles/${name}.schema.json`, import.meta.url);
    ajv.addSchema(JSON.parse(readFileSync(url, 'utf8')) as object);
  }
  return ajv;
}

const ajv = loadProfiles();
const profile = (name: string) =>
  ajv.getSchema(`https://recalesce.invalid/profiles/${name}`) as ValidateFunction;

function faultsOf(name: string, value: unknown): string {
  return profile(name)(value) ? '' : ajv.errorsText(profile(name).errors);
}

function documents(change?: (snapshot: ReleaseSnapshot) => void): Map<string, Buffer> {
  const { snapshot } = makeSnapshot(3, change);
  return new Map(releaseDocuments(snapshot).map(({ path, content }) => [path, content]));
}

interface Resource {
  name: string;
  type?: string;
  path: string;
  bytes: number;
  hash: string;
  schema: SchemaDescriptor;
}

const packageOf = (files: Map<string, Buffer>) =>
  JSON.parse(files.get('data/datapackage.json')!.toString('utf8')) as { resources: Resource[] } & Record<
    string,
    unknown
  >;

function readTables(files: Map<string, Buffer>): ReadTable[] {
  const tables = packageOf(files).resources.filter((resource) => resource.type === 'table');
  return tables.map(({ name, path, schema }) => {
    const [header, ...rows] = parseCsv(files.get(`data/${path}`)!, { record_delimiter: '\n' }) as string[][];
    return { name, schema, header: header!, rows };
  });
}

describe('datapackage.json', () => {
  it('follows the profiles of Data Package 2.0, Table Schema and Table Dialect', () => {
    expect(faultsOf('data-package', packageOf(documents()))).toBe('');
  });

  it.each<[string, (descriptor: Record<string, unknown> & { resources: Resource[] }) => void]>([
    ['no resources', (descriptor) => (descriptor.resources = [])],
    ['the profile missing, which would mean version 1', (descriptor) => delete descriptor.$schema],
    ['a version that is no SemVer', (descriptor) => (descriptor.version = '1.0')],
    ['an absolute path', (descriptor) => (descriptor.resources[0]!.path = '/metadata.csv')],
    ['a path that leads out', (descriptor) => (descriptor.resources[0]!.path = 'a/../../metadata.csv')],
    ['a bare hash, which would mean MD5', (descriptor) => (descriptor.resources[0]!.hash = 'f'.repeat(64))],
    ['a field type that is none', (descriptor) => (descriptor.resources[0]!.schema.fields[0]!.type = 'text')],
    [
      'a limit on a text',
      (descriptor) => (descriptor.resources[0]!.schema.fields[0]!.constraints = { minimum: 1 }),
    ],
  ])('would be refused with %s', (_what, spoil) => {
    const descriptor = packageOf(documents());
    spoil(descriptor);
    expect(faultsOf('data-package', descriptor)).not.toBe('');
  });

  it('gives every file its true size and hash, and no name or path twice', () => {
    const { snapshot } = makeSnapshot(3);
    const files = documents();
    const { resources } = packageOf(files);
    for (const table of resources.filter((resource) => resource.type === 'table')) {
      const content = files.get(`data/${table.path}`)!;
      expect(table).toMatchObject({ bytes: content.length, hash: `sha256:${sha256Hex(content)}` });
    }
    const audio = resources
      .filter((resource) => resource.type === undefined)
      .map((resource) => resource.hash);
    expect(audio).toEqual(snapshot.recordings.map((recording) => `sha256:${recording.sha256}`));
    expect(new Set(resources.map((resource) => resource.name)).size).toBe(resources.length);
    expect(new Set(resources.map((resource) => resource.path)).size).toBe(resources.length);
  });

  it('names every table there is', () => {
    const files = documents();
    const csvs = [...files.keys()].filter((path) => path.endsWith('.csv')).sort();
    const named = packageOf(files).resources.filter((resource) => resource.type === 'table');
    expect(named.map((resource) => `data/${resource.path}`).sort()).toEqual(csvs);
    expect(csvs).toHaveLength(7);
  });
});

describe('the tables', () => {
  it('hold only what their Table Schema allows, in every cell of every row', () => {
    const tables = readTables(documents());
    expect(tables.flatMap(tableFaults)).toEqual([]);
    expect(tables.every((table) => table.rows.length > 0)).toBe(true);
  });

  it('refer only to rows that are there', () => {
    expect(foreignKeyFaults(readTables(documents()))).toEqual([]);
  });

  it('would be refused with a wrong cell, a missing one, a double key or a stray reference', () => {
    const spoiled = (name: string, column: string, cell: string) => {
      const tables = readTables(documents());
      const table = tables.find((candidate) => candidate.name === name)!;
      table.rows[0]![table.header.indexOf(column)] = cell;
      return [...tables.flatMap(tableFaults), ...foreignKeyFaults(tables)].join();
    };
    expect(spoiled('events', 'start_sample', '1,5')).toContain('is no integer');
    expect(spoiled('events', 'start_sample', '-1')).toContain('>= 0');
    expect(spoiled('events', 'class', 'dragon')).toContain('allowed values');
    expect(spoiled('events', 'file_name', '')).toContain('must be string');
    expect(spoiled('recordings', 'sha256', 'abc')).toContain('pattern');
    expect(spoiled('marks', 'event_id', '01890000-0000-7000-9000-000000000001')).toContain('not unique');
    expect(spoiled('recordings', 'run_id', 'run-9')).toContain('is not in runs');
  });

  it('have file_name first in metadata.csv, one row for each audio file', () => {
    const recordings = readTables(documents()).find((table) => table.name === 'recordings')!;
    expect(recordings.header[0]).toBe('file_name');
    expect(recordings.rows.map((row) => row[0])).toEqual(
      [0, 1, 2].map((n) => `audio/01890000-0000-7000-8000-00000000000${n}.wav`),
    );
  });

  it('tell of a recording that was taken out of a film how it was coded and where it begins, not what it was called', () => {
    const sha256 = 'c'.repeat(64);
    const film = {
      sizeBytes: 5000,
      sha256,
      container: 'MP4',
      trackSampleRateHz: 48_000,
      soundTracks: 1,
    } as const;
    const files = documents(({ recordings: [first, second] }) => {
      Object.assign(first!, { camera: { ...film, codec: 'aac', gaps: 2, soundStartS: -0.25 } });
      Object.assign(second!, { camera: { ...film, codec: 'pcm', gaps: 0, soundStartS: null } });
    });
    const recordings = readTables(files).find((table) => table.name === 'recordings')!;
    const cells = (column: string) => recordings.rows.map((row) => row[recordings.header.indexOf(column)]);
    expect(cells('camera_codec')).toEqual(['aac', 'pcm', '']);
    expect(cells('camera_is_lossy')).toEqual(['true', 'false', '']);
    expect(cells('camera_sound_start_s')).toEqual(['-0.25', '', '']);
    expect(cells('camera_gaps')).toEqual(['2', '0', '']);
    expect(cells('camera_sha256')).toEqual([sha256, sha256, '']);
    expect(tableFaults(recordings)).toEqual([]);
  });

  it('call a file what it came in as, and tell the layout that a file cannot tell itself', () => {
    const layout = {
      kind: 'raw',
      encoding: 'signed',
      bitsPerSample: 16,
      byteOrder: 'big',
      channels: 1,
      sampleRateHz: 48_000,
      headerBytes: 0,
    } as const;
    const files = documents((snapshot) => {
      const [first, second] = snapshot.recordings;
      first!.format.container = 'FLAC';
      first!.fileName = `${first!.id}.flac`;
      second!.format.container = 'raw';
      Object.assign(second!, { fileName: `${second!.id}.raw`, layout });
    });
    const recordings = readTables(files).find((table) => table.name === 'recordings')!;
    const cells = (column: string) => recordings.rows.map((row) => row[recordings.header.indexOf(column)]);
    expect(cells('file_name').map((name) => name?.split('.').at(-1))).toEqual(['flac', 'raw', 'wav']);
    expect(cells('declared_layout')).toEqual(['', JSON.stringify(layout), '']);
    expect(tableFaults(recordings)).toEqual([]);
    const audio = packageOf(files).resources.filter(({ name }) => name.startsWith('audio-'));
    expect(audio.map((resource) => (resource as unknown as { mediatype: string }).mediatype)).toEqual([
      'audio/flac',
      'application/octet-stream',
      'audio/vnd.wave',
    ]);
  });

  it('order events by file, start sample as a number, and id', () => {
    const files = documents((snapshot) => {
      const [first, second] = snapshot.events;
      Object.assign(first!, { startSample: 200, endSample: 210 });
      Object.assign(second!, { startSample: 30, endSample: 210 });
    });
    const events = readTables(files).find((table) => table.name === 'events')!;
    expect(events.rows.map((row) => row[3])).toEqual(['30', '200']);
  });

  it('count time by the rate of the sound where a file plays slower than life', () => {
    const files = documents((snapshot) => {
      Object.assign(snapshot.recordings[0]!, { timeExpansion: 10, sampleRateHz: 480_000 });
    });
    const events = readTables(files).find((table) => table.name === 'events')!;
    expect(events.rows[0]!.slice(3, 7)).toEqual(['100', '140', '0.000208333', '0.000291667']);
  });

  it('guard free text against formulas and say so in the field', () => {
    const files = documents();
    expect(files.get('data/metadata.csv')!.toString()).toContain(`"'=HYPERLINK(""x"")"`);
    const field = packageOf(files).resources[0]!.schema.fields.find(
      (candidate) => candidate.name === 'note',
    )!;
    expect(JSON.stringify(field)).toContain('apostrophe');
  });
});

describe('CITATION.cff', () => {
  const citation = (change?: (snapshot: ReleaseSnapshot) => void) =>
    parseYaml(documents(change).get('data/CITATION.cff')!.toString('utf8')) as Record<string, unknown>;

  it('follows Citation File Format 1.2.0, with and without an identifier', () => {
    expect(faultsOf('citation-file', citation())).toBe('');
    expect(
      faultsOf(
        'citation-file',
        citation((snapshot) => (snapshot.doi = null)),
      ),
    ).toBe('');
  });

  it('keeps version 1.10.0 and version-like texts as texts', () => {
    expect(citation().version).toBe('1.10.0');
    expect(documents().get('data/CITATION.cff')!.toString()).toContain('version: "1.10.0"');
  });

  it('names a person credited twice once', () => {
    expect(citation().authors).toEqual([
      { name: 'Ada Example', orcid: 'https://orcid.org/0000-0002-1825-0097' },
      { name: 'Bjørn Example' },
    ]);
  });

  it('holds texts of people without becoming other YAML', () => {
    const title = 'a: [b] # "c" \'d\'\n- e & *f';
    expect(citation((snapshot) => (snapshot.collection.title = title)).title).toBe(
      'a: [b] # "c" \'d\' - e & *f',
    );
  });
});

describe('the other documents', () => {
  it('give the citation as one line', () => {
    expect(citationText(makeSnapshot().snapshot)).toBe(
      'Ada Example; Bjørn Example (2026): Cracks in freezing water: "north" series, version 1.10.0. Ice Laboratory. Data set. https://doi.org/10.5072/ice-cracks.1',
    );
  });

  it('say in the README what a reader must know', () => {
    const readme = documents().get('data/README.md')!.toString('utf8');
    for (const text of [
      'probable cause',
      'as the sensor and the sample rate',
      'MAJOR:',
      'sha512sum -c',
      'half-open',
      'apostrophe',
      'pd.read_csv',
      'labels/passes.csv (1 row)',
    ]) {
      expect(readme).toContain(text);
    }
  });

  it('do not let a description make headings', () => {
    const headings = documents().get('data/README.md')!.toString('utf8').match(/^# .*/gm);
    expect(headings).toEqual(['# Cracks in freezing water: "north" series']);
  });

  it('name in LICENSE.txt the licence of the whole, and those of members that differ', () => {
    const text = documents((snapshot) => (snapshot.recordings[0]!.licence = 'CC0-1.0'))
      .get('data/LICENSE.txt')!
      .toString();
    expect(text).toContain('SPDX-License-Identifier: CC-BY-4.0');
    expect(text).toContain('https://creativecommons.org/licenses/by/4.0/legalcode');
    expect(text).toContain('SPDX-License-Identifier: CC0-1.0');
  });

  it('list every version in the changelog, newest first', () => {
    const text = documents().get('data/CHANGELOG.md')!.toString();
    expect(text.match(/^## .*/gm)).toEqual(['## 1.10.0 (2026-03-01)', '## 1.0.0 (2026-01-15)']);
  });
});

describe('the step between two releases', () => {
  const bump = (change: (snapshot: ReleaseSnapshot) => void) => {
    const { snapshot } = makeSnapshot(2);
    const { snapshot: next } = makeSnapshot(2, change);
    return requiredBump(releaseContents(snapshot), releaseContents(next));
  };

  it('is a patch where only documents differ', () => {
    const required = bump((next) => {
      next.version = '1.10.1';
      next.notes = 'Better words.';
      next.collection.description = 'Other words, the same data.';
    });
    expect(required).toEqual({ bump: 'patch', reasons: [] });
  });

  it('is minor where a recording, its marks and its events are added', () => {
    const { snapshot } = makeSnapshot(2);
    const { snapshot: next } = makeSnapshot(3);
    const required = requiredBump(releaseContents(snapshot), releaseContents(next));
    expect(required.bump).toBe('minor');
    expect(required.reasons).toContain('1 row of recordings was added.');
  });

  it('is major where a label, a measured figure or audio changed, or an event went', () => {
    expect(bump((next) => (next.events[0]!.classKey = 'bubble')).reasons).toEqual([
      '1 row of events was changed.',
    ]);
    expect(bump((next) => (next.events[0]!.parameters!.counts = 8)).bump).toBe('major');
    expect(bump((next) => (next.recordings[0]!.sha256 = 'a'.repeat(64))).bump).toBe('major');
    expect(bump((next) => next.events.pop()).bump).toBe('major');
  });
});
