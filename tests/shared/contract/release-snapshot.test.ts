import { describe, expect, it } from 'vitest';
import { releaseSnapshotSchema, type ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import { splitWordIn } from '../../../shared/domain/split-word.ts';
import { makeSnapshot } from '../../server/packaging/snapshot-fixture.ts';

function faultOf(change: (snapshot: ReleaseSnapshot) => void): string {
  const parsed = releaseSnapshotSchema.safeParse(makeSnapshot(2, change).snapshot);
  return parsed.success
    ? ''
    : parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join(' | ');
}

describe('a release snapshot', () => {
  it('comes back the same from JSON', () => {
    const { snapshot } = makeSnapshot();
    expect(releaseSnapshotSchema.parse(JSON.parse(JSON.stringify(snapshot)))).toEqual(snapshot);
  });

  it.each<[string, string, (snapshot: ReleaseSnapshot) => void]>([
    [
      'an audio name that is not the id',
      'must be the id',
      ({ recordings }) => (recordings[0]!.fileName = 'crack.wav'),
    ],
    ['an id that is a path', 'recordings.0.id', ({ recordings }) => (recordings[0]!.id = '../x')],
    ['a slug that leads out', 'slug', ({ collection }) => (collection.slug = '../x')],
    ['a slug that names a split', 'split', ({ collection }) => (collection.slug = 'ice-test')],
    ['a date before ZIP knows dates', '1980', (snapshot) => (snapshot.releaseDate = '1979-12-31')],
    ['a version that is no version', 'version', (snapshot) => (snapshot.version = '1.0')],
    ['a mark past the end', 'does not lie in its recording', ({ marks }) => (marks[0]!.endSample = 481)],
    [
      'a mark of no length',
      'does not lie in its recording',
      ({ marks }) => (marks[0]!.endSample = marks[0]!.startSample),
    ],
    ['a mark on a channel that is not there', 'names a channel', ({ marks }) => (marks[0]!.channel = 1)],
    ['a mark of an unknown class', 'names no class', ({ events }) => (events[0]!.classKey = 'dragon')],
    [
      'a mark of a pass over another recording',
      'names no pass',
      ({ marks, recordings }) => (marks[0]!.recordingId = recordings[1]!.id),
    ],
    ['a recording without its run', 'names no run', ({ runs }) => runs.pop()],
    ['a recording twice', 'is there twice', ({ recordings }) => recordings.push(recordings[0]!)],
    ['a changelog that ends elsewhere', 'changelog', ({ changelog }) => changelog.pop()],
    [
      'an address instead of an identifier',
      'doi',
      (snapshot) => (snapshot.doi = 'https://doi.org/10.5072/x'),
    ],
    ['no recordings', 'recordings', (snapshot) => (snapshot.recordings = [])],
    ['nobody to credit', 'creators', (snapshot) => (snapshot.creators = [])],
  ])('is refused with %s', (_what, message, change) => {
    expect(faultOf(change)).toContain(message);
  });

  it('knows the words loaders take for splits, as whole words only', () => {
    expect(splitWordIn('ice-test-2')).toBe('test');
    expect(splitWordIn('Validation')).toBe('validation');
    expect(splitWordIn('latest-strain-retraining')).toBeNull();
  });
});
