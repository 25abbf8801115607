import { describe, expect, it } from 'vitest';
import type { ReleaseListItem, ReleaseState } from '@shared/contract/releases.ts';
import {
  byCollection,
  contentsInShort,
  isInPreparation,
  licenceOptions,
} from '@/components/releases/release-words.ts';
import { versionHint, versionMessage } from '@/components/releases/version-check.ts';

function item(collectionId: string, version: string, state: ReleaseState): ReleaseListItem {
  return {
    ...{
      id: `${collectionId}/${version}`,
      collectionId,
      collectionTitle: 'Ice',
      slug: 'ice',
      version,
      state,
    },
    ...{ licence: 'CC-BY-4.0', releaseDate: '2026-12-01', recordingCount: 4, eventCount: 1, sizeBytes: null },
    publishedAt: null,
  };
}

describe('the list of releases', () => {
  it('has one entry for each collection, led by the newest version that can be had', () => {
    const items = [
      item('a', '1.1.0', 'withdrawn'),
      item('b', '2.0.0', 'published'),
      item('a', '1.0.0', 'published'),
    ];
    const groups = byCollection(items);
    expect(groups.map(({ newest }) => newest.id)).toEqual(['a/1.0.0', 'b/2.0.0']);
    expect(groups[0]?.earlier.map(({ version }) => version)).toEqual(['1.1.0']);
  });

  it('keeps a collection of which everything was withdrawn', () => {
    expect(byCollection([item('a', '1.0.0', 'withdrawn')])[0]?.newest.version).toBe('1.0.0');
  });

  it('counts what is in a release', () => {
    expect(contentsInShort(item('a', '1.0.0', 'building')).replace(/\u00A0/g, ' ')).toBe(
      '4 recordings, 1 event',
    );
    expect(contentsInShort({ ...item('a', '1.0.0', 'published'), sizeBytes: 49_113_221 })).toContain('49.11');
  });

  it('tells what is in preparation from what everybody sees', () => {
    const states: ReleaseState[] = ['building', 'built', 'failed', 'published', 'withdrawn'];
    expect(states.filter((state) => isInPreparation({ state }))).toEqual(['building', 'built', 'failed']);
  });
});

describe('the version of a release', () => {
  it('may not be smaller than the difference asks for', () => {
    expect(versionMessage('1.0.1', '1.1.0')).toBe('has to be 1.1.0 or more');
    expect(versionMessage('1.10.0', '1.9.0')).toBeUndefined();
    expect(versionMessage('2', '1.1.0')).toBe('is a version of the form 1.0.0');
  });

  it('comes with the reason for the least one', () => {
    const hint = versionHint({
      previousVersion: '1.0.0',
      minimumVersion: '1.1.0',
      minimumVersionReason: '3 rows of recordings were added.',
    });
    expect(hint).toBe('After 1.0.0 it has to be at least 1.1.0. 3 rows of recordings were added.');
  });
});

describe('the licences to choose from', () => {
  it('are only the possible ones, each with what it means', () => {
    const options = licenceOptions(['CC-BY-SA-4.0']);
    expect(options).toHaveLength(1);
    expect(options[0]?.label).toContain('Share Alike');
    expect(options[0]?.hint).toContain('carries the same licence');
  });
});
