import { licences } from '@shared/domain/licence-mix.ts';
import type { Licence } from '@shared/contract/licence.ts';
import type { Release, ReleaseListItem, ReleaseState } from '@shared/contract/releases.ts';
import type { ChoiceOption } from '@/components/app/choice-option.ts';
import type { Fact } from '@/components/app/fact.ts';
import { formatBytes, formatCount, formatDate, NO_VALUE } from '@/composables/useFormat.ts';

interface StateWords {
  value: string;
  tone: 'plain' | 'melt' | 'glow';
}

export const releaseStateWords: Readonly<Record<ReleaseState, StateWords>> = {
  building: { value: 'being built', tone: 'melt' },
  built: { value: 'built, not published', tone: 'melt' },
  failed: { value: 'build failed', tone: 'glow' },
  published: { value: 'published', tone: 'plain' },
  withdrawn: { value: 'withdrawn', tone: 'glow' },
};

/** In preparation: seen by curators only. */
export function isInPreparation({ state }: Pick<ReleaseListItem, 'state'>): boolean {
  return state === 'building' || state === 'built' || state === 'failed';
}

/** "4 recordings, 98 events" and the size, as far as it is known. */
export function contentsInShort(item: ReleaseListItem): string {
  const parts = [formatCount(item.recordingCount, 'recording'), formatCount(item.eventCount, 'event')];
  if (item.sizeBytes !== null) parts.push(formatBytes(item.sizeBytes));
  return parts.join(', ');
}

export interface CollectionVersions {
  collectionId: string;
  newest: ReleaseListItem;
  earlier: ReleaseListItem[];
}

/** Versions of one collection together, newest first; a withdrawn one leads only where there is no other. */
export function byCollection(items: readonly ReleaseListItem[]): CollectionVersions[] {
  const groups = new Map<string, ReleaseListItem[]>();
  for (const item of items) groups.set(item.collectionId, [...(groups.get(item.collectionId) ?? []), item]);
  return [...groups].flatMap(([collectionId, versions]) => {
    const newest = versions.find(({ state }) => state === 'published') ?? versions[0];
    if (!newest) return [];
    return [{ collectionId, newest, earlier: versions.filter((item) => item !== newest) }];
  });
}

/** The licences that the members allow, each with what it means. */
export function licenceOptions(possible: readonly Licence[]): ChoiceOption<Licence>[] {
  return possible.map((value) => ({
    value,
    label: `${value}: ${licences[value].title}`,
    hint: licences[value].summary,
  }));
}

/** The facts in the margin of a release's page. */
export function releaseFacts(release: Release): Fact[] {
  const { licence, labs, fileName, sizeBytes, doi } = release;
  return [
    { key: 'published', term: 'Published', value: formatDate(release.publishedAt) },
    { key: 'licence', term: 'Licence', value: licence },
    { key: 'publisher', term: 'Publisher', value: release.publisher, isWords: true },
    {
      key: 'labs',
      term: labs.length === 1 ? 'Lab' : 'Labs',
      value: labs.join(', ') || NO_VALUE,
      isWords: true,
    },
    ...(doi ? [{ key: 'doi', term: 'DOI', value: doi }] : []),
    { key: 'archive', term: 'Archive', value: fileName ?? NO_VALUE },
    { key: 'size', term: 'Size', value: formatBytes(sizeBytes) },
    { key: 'files', term: 'Files in it', value: String(release.files.length) },
  ];
}
