import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  compareVersions,
  formatVersion,
  nextVersion,
  parseVersion,
  requiredBump,
  versionRefusal,
  type ReleaseContents,
  type Version,
} from '../../../shared/domain/release-version.ts';

const part = fc.integer({ min: 0, max: 99_999 });
const versions: fc.Arbitrary<Version> = fc.record({ major: part, minor: part, patch: part });

describe('version numbers', () => {
  it('reads back what it writes', () => {
    fc.assert(
      fc.property(versions, (version) => {
        expect(parseVersion(formatVersion(version))).toEqual(version);
      }),
    );
  });

  // SemVer 2.0.0, section 2: no leading zeros, exactly three numbers (from memory).
  it.each(['1.0', '1.0.0.0', '01.0.0', '1.0.0-rc.1', '1.0.0+5', 'v1.0.0', ' 1.0.0', '1.0.-1', ''])(
    'refuses "%s"',
    (text) => {
      expect(parseVersion(text)).toBeNull();
      expect(versionRefusal(null, text)).toMatch(/not a version/);
    },
  );

  // SemVer 2.0.0, section 11: 1.0.0 < 2.0.0 < 2.1.0 < 2.1.1 (from memory); and numbers, not texts, are compared.
  it('orders as SemVer orders', () => {
    const texts = ['1.0.0', '2.0.0', '2.1.0', '2.1.1', '2.9.0', '2.10.0'];
    const shuffled = [...texts].reverse().map((text) => parseVersion(text)!);
    expect(shuffled.sort(compareVersions).map(formatVersion)).toEqual(texts);
  });

  it('steps to a greater version that is enough for its own step', () => {
    const bumps = fc.constantFrom('major' as const, 'minor' as const, 'patch' as const);
    fc.assert(
      fc.property(versions, bumps, (version, bump) => {
        const next = nextVersion(version, bump);
        expect(compareVersions(next, version)).toBeGreaterThan(0);
        expect(versionRefusal(formatVersion(version), formatVersion(next), bump)).toBeNull();
      }),
    );
  });

  it('refuses a step smaller than the difference needs', () => {
    expect(versionRefusal('1.2.3', '1.2.4', 'minor')).toMatch(/at least 1\.3\.0/);
    expect(versionRefusal('1.2.3', '1.9.0', 'major')).toMatch(/at least 2\.0\.0/);
    expect(versionRefusal('1.2.3', '1.2.3', 'patch')).toMatch(/at least 1\.2\.4/);
    expect(versionRefusal('1.2.3', '3.0.0', 'minor')).toBeNull();
  });
});

function contents(change: (contents: ReleaseContents) => void = () => undefined): ReleaseContents {
  const made: ReleaseContents = {
    tables: [
      {
        name: 'events',
        columns: [
          { name: 'event_id', type: 'string' },
          { name: 'class', type: 'string' },
        ],
        keyColumns: ['event_id'],
        rows: [
          ['a', 'crack'],
          ['b', 'bubble'],
        ],
      },
    ],
    files: [{ path: 'audio/1.wav', sha256: '11' }],
  };
  change(made);
  return made;
}

describe('the step a difference needs', () => {
  it('is a patch where no data differ, whatever the order of the rows', () => {
    const shuffled = contents((next) => next.tables[0]!.rows.reverse());
    expect(requiredBump(contents(), shuffled)).toEqual({ bump: 'patch', reasons: [] });
  });

  it.each<[string, (next: ReleaseContents) => void]>([
    ['a row is added', (next) => next.tables[0]!.rows.push(['c', 'crack'])],
    ['a file is added', (next) => next.files.push({ path: 'audio/2.wav', sha256: '22' })],
    ['a table is added', (next) => next.tables.push({ ...next.tables[0]!, name: 'phases' })],
    [
      'a column is added at the front',
      (next) => {
        next.tables[0]!.columns.unshift({ name: 'note', type: 'string' });
        next.tables[0]!.rows.forEach((row) => row.unshift('new'));
      },
    ],
  ])('is minor where %s', (_what, change) => {
    const required = requiredBump(contents(), contents(change));
    expect(required.bump).toBe('minor');
    expect(required.reasons).toHaveLength(1);
  });

  it.each<[string, (next: ReleaseContents) => void]>([
    ['a label changed', (next) => (next.tables[0]!.rows[0]![1] = 'bubble')],
    ['a row is gone', (next) => next.tables[0]!.rows.pop()],
    ['the bytes of a file changed', (next) => (next.files[0]!.sha256 = '33')],
    ['a file is gone', (next) => next.files.pop()],
    ['a table is gone', (next) => next.tables.pop()],
    ['a column changed its type', (next) => (next.tables[0]!.columns[1]!.type = 'integer')],
    ['a column was renamed', (next) => (next.tables[0]!.columns[1]!.name = 'cause')],
    [
      'a label changed while rows were added',
      (next) => {
        next.tables[0]!.rows[0]![1] = 'bubble';
        next.tables[0]!.rows.push(['c', 'crack']);
      },
    ],
  ])('is major where %s', (_what, change) => {
    expect(requiredBump(contents(), contents(change)).bump).toBe('major');
  });

  it('says in words what differs', () => {
    const changed = contents((next) => {
      next.tables[0]!.rows[0]![1] = 'bubble';
      next.tables[0]!.rows.push(['c', 'crack'], ['d', 'crack']);
    });
    expect(requiredBump(contents(), changed).reasons).toEqual([
      '1 row of events was changed.',
      '2 rows of events were added.',
    ]);
  });

  it('does not mix up cells whose texts run together', () => {
    const joined = contents((made) => (made.tables[0]!.rows = [['a', 'b","c']]));
    const parted = contents((made) => (made.tables[0]!.rows = [['a', 'b,c']]));
    expect(requiredBump(joined, parted).bump).toBe('major');
  });
});
