import type { ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import type { Release, ReleaseListItem } from '../../../shared/contract/releases.ts';
import type { ReleaseSummary } from '../../db/schema/collections.ts';
import { citationText } from '../../packaging/documents/citation.ts';
import { loadExample, verifyExample } from '../../packaging/documents/usage-examples.ts';
import { toInstant } from '../../services/clock.ts';
import type { ReleaseRow, ReleaseView } from './releases.queries.ts';

export function toListItem({ release, collection, artifact }: ReleaseView): ReleaseListItem {
  const { id, collectionId, version, state, licence, releaseDate, recordingCount, eventCount } = release;
  return {
    ...{ id, collectionId, version, state, licence, releaseDate, recordingCount, eventCount },
    collectionTitle: collection.title,
    slug: collection.slug,
    sizeBytes: artifact?.sizeBytes ?? null,
    publishedAt: release.publishedAtMs === null ? null : toInstant(release.publishedAtMs),
  };
}

export function toRelease(view: ReleaseView, others: readonly ReleaseRow[]): Release {
  const { release, artifact } = view;
  const { notes, failure, progress, withdrawnReason, summary } = release;
  return {
    ...toListItem(view),
    ...summary,
    ...{ notes, failure, progress, withdrawnReason },
    usage: artifact && { verify: verifyExample(baseNameOf(artifact.fileName)), load: loadExample },
    doi: null,
    fileName: artifact?.fileName ?? null,
    sha256: artifact?.sha256 ?? null,
    files: artifact?.files ?? [],
    otherVersions: others
      .filter((other) => other.id !== release.id)
      .map(({ id, version, state, releaseDate }) => ({ id, version, state, releaseDate })),
  };
}

function baseNameOf(fileName: string): string {
  return fileName.replace(/\.zip$/, '');
}

export function toSummary(snapshot: ReleaseSnapshot): ReleaseSummary {
  const countOf = (key: string) => snapshot.events.filter((event) => event.classKey === key).length;
  return {
    description: snapshot.collection.description,
    publisher: snapshot.publisher,
    creators: snapshot.creators,
    citation: citationText(snapshot),
    classes: snapshot.scheme.classes
      .map(({ key, title }) => ({ key, title, count: countOf(key) }))
      .filter((item) => item.count > 0),
    materials: materialsOf(snapshot),
    labs: [...new Set(snapshot.recordings.map((recording) => recording.labName))].sort(),
  };
}

function materialsOf({ runs, recordings }: ReleaseSnapshot): ReleaseSummary['materials'] {
  const materialOf = new Map(runs.map((run) => [run.id, run.material]));
  const counts = new Map<string, number>();
  for (const recording of recordings) {
    const material = materialOf.get(recording.runId) ?? 'unknown';
    counts.set(material, (counts.get(material) ?? 0) + 1);
  }
  return [...counts].map(([material, count]) => ({ material, recordings: count })).sort(byMaterial);
}

function byMaterial(a: { material: string }, b: { material: string }): number {
  return a.material < b.material ? -1 : 1;
}
