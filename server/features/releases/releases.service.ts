import { Readable } from 'node:stream';
import type { z } from 'zod';
import type { Gates } from '../../../shared/contract/collections.ts';
import { toTotal, type Page } from '../../../shared/contract/page.ts';
import { releaseSnapshotSchema, type ReleaseSnapshot } from '../../../shared/contract/release-snapshot.ts';
import type {
  CreateRelease,
  listReleasesQuerySchema,
  Release,
  ReleaseListItem,
} from '../../../shared/contract/releases.ts';
import { licenceMixRefusal } from '../../../shared/domain/licence-mix.ts';
import { versionRefusal } from '../../../shared/domain/release-version.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import { visibleReleases } from '../../authorize/visible-releases.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, invalidField, notFound, ProblemError } from '../../http/problem.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import type { StoredBlob } from '../../store/blob-store.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { gatesOf, isReleasable } from '../collections/gates.ts';
import type { CollectionRow, CollectionsService } from '../collections/collections.service.ts';
import type { ReleasePlan } from './release-plan.ts';
import { toListItem, toRelease, toSummary } from './releases.map.ts';
import {
  countReleases,
  countUnsharedItems,
  deleteRelease,
  insertRelease,
  insertSnapshot,
  selectPublished,
  selectRelease,
  selectReleases,
  selectVersion,
  updateRelease,
  type ReleaseView,
} from './releases.queries.ts';
import { insertLabelerNumbers, selectLabelerNumbers } from './snapshot.queries.ts';

interface ReleasesParts extends Pick<Ground, 'db' | 'clock' | 'ids' | 'jobs' | 'store' | 'activity'> {
  audit: AuditService;
  collections: CollectionsService;
  plan: ReleasePlan;
}

export type ReleasesService = ReturnType<typeof createReleasesService>;

export function createReleasesService(parts: ReleasesParts) {
  const { db, clock, ids, jobs, store, activity, audit, collections, plan } = parts;

  function list(actor: Actor | null, query: z.output<typeof listReleasesQuerySchema>): Page<ReleaseListItem> {
    const filter = { visible: visibleReleases(actor), collectionId: query.collectionId };
    const after = readRowCursor(query.cursor);
    const rows = selectReleases(db, filter, { after, limit: query.limit + 1 });
    const { shown, nextCursor } = pageOf(rows, query.limit, ({ release }) => ({
      key: release.version,
      id: release.id,
    }));
    return { items: shown.map(toListItem), nextCursor, total: toTotal(countReleases(db, filter)) };
  }

  function requireView(actor: Actor | null, id: string): ReleaseView {
    const view = selectRelease(db, id, visibleReleases(actor));
    if (!view) throw notFound('This release');
    return view;
  }

  function get(actor: Actor | null, id: string): Release {
    const view = requireView(actor, id);
    return toRelease(view, selectPublished(db, view.collection.id));
  }

  async function gates(actor: Actor, collectionId: string): Promise<Gates> {
    return plan.gates(collections.requireView(db, actor, collectionId).collection);
  }

  /** Freezes the collection as it is, stores the snapshot durably, and only then writes the rows and the job. */
  async function create(actor: Actor, collectionId: string, input: CreateRelease): Promise<Release> {
    authorize(actor, { action: 'create', name: 'Release', row: { state: 'building' } });
    const { collection } = collections.requireView(db, actor, collectionId);
    requireOpenGates(collection, input);
    await requireVersion(collection, input);
    const snapshot = requireValid(
      plan.snapshot(db, collection, { ...input, published: publishedOf(collection) }),
    );
    const blob = await store.putStream(Readable.from([JSON.stringify(snapshot)]));
    const id = ids.next();
    write(db, (tx) => {
      requireOpenGates(collection, input);
      replaceUnpublished(tx, collection, input.version);
      insert(tx, { actor, id, collection, snapshot, blob });
    });
    return get(actor, id);
  }

  interface NewRelease {
    actor: Actor;
    id: string;
    collection: CollectionRow;
    snapshot: ReleaseSnapshot;
    blob: StoredBlob;
  }

  function insert(tx: Tx, { actor, id, collection, snapshot, blob }: NewRelease): void {
    const createdAtMs = clock.nowMs();
    insertSnapshot(tx, { ...blob, createdAtMs });
    keepLabelerNumbers(tx, collection.id);
    const { version, licence, notes, releaseDate } = snapshot;
    const counts = { recordingCount: snapshot.recordings.length, eventCount: snapshot.events.length };
    const facts = { id, collectionId: collection.id, version, licence, notes, releaseDate, ...counts };
    const origin = {
      snapshotSha256: blob.sha256,
      summary: toSummary(snapshot),
      createdById: actor.id,
      createdAtMs,
    };
    insertRelease(
      tx,
      { ...facts, ...origin, state: 'building' },
      snapshot.recordings.map((recording) => recording.id),
    );
    jobs.enqueue(tx, { kind: 'build-release', payload: { releaseId: id } });
    audit.record(
      tx,
      entry(actor, 'release.created', id, { version, slug: collection.slug, snapshot: blob.sha256 }),
    );
  }

  function keepLabelerNumbers(tx: Tx, collectionId: string): void {
    const known = selectLabelerNumbers(tx, collectionId);
    const fresh = [...plan.labelerNumbers(tx, collectionId)].filter(([labelerId]) => !known.has(labelerId));
    insertLabelerNumbers(
      tx,
      fresh.map(([labelerId, ordinal]) => ({ collectionId, labelerId, ordinal })),
    );
  }

  /** A number that never went out may be used again. */
  function replaceUnpublished(tx: Tx, collection: CollectionRow, version: string): void {
    const taken = selectVersion(tx, collection.id, version);
    if (!taken) return;
    if (taken.state === 'building') throw conflict(`Version ${version} is being built at this moment.`);
    if (taken.state !== 'built' && taken.state !== 'failed')
      throw conflict(`Version ${version} was published before.`);
    deleteRelease(tx, taken.id);
  }

  function publishedOf(collection: CollectionRow) {
    return selectPublished(db, collection.id);
  }

  function requireOpenGates(collection: CollectionRow, { licence }: CreateRelease): void {
    const members = collections.members(db, collection.id);
    const found = gatesOf(collection.id, members);
    const open = found.filter((gate) => gate.state === 'open').map((gate) => gate.sentence);
    if (!isReleasable(found)) throw conflict(`It cannot be released yet. ${open.join(' ')}`);
    const refusal = licenceMixRefusal(
      members.map((member) => member.licence),
      licence,
    );
    if (refusal) throw invalidField('licence', refusal);
  }

  async function requireVersion(collection: CollectionRow, { version }: CreateRelease): Promise<void> {
    const published = publishedOf(collection);
    const previous = published.at(-1)?.version ?? null;
    const bump = previous === null ? undefined : (await plan.bumpAfter(collection, published)).bump;
    const refusal = versionRefusal(previous, version, bump);
    if (refusal) throw invalidField('version', refusal);
  }

  function publish(actor: Actor, id: string): Release {
    write(db, (tx) => {
      const { release } = requireView(actor, id);
      authorize(actor, { action: 'publish', name: 'Release', row: release });
      if (release.state !== 'built')
        throw conflict('Only a release that was built and verified can be published.');
      const unshared = countUnsharedItems(tx, id);
      if (unshared > 0)
        throw conflict(
          `${unshared} of its recordings are not shared any more; take them out and build again.`,
        );
      updateRelease(tx, id, { state: 'published', publishedAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'release.published', id, { version: release.version }));
    });
    activity.publish({ topic: 'release', id, state: 'published', progress: 1 }, { roles: ['curator'] });
    return get(actor, id);
  }

  function withdraw(actor: Actor, id: string, reason: string): Release {
    write(db, (tx) => {
      const { release } = requireView(actor, id);
      authorize(actor, { action: 'publish', name: 'Release', row: release });
      if (release.state !== 'published') throw conflict('Only a published release can be withdrawn.');
      updateRelease(tx, id, { state: 'withdrawn', withdrawnAtMs: clock.nowMs(), withdrawnReason: reason });
      audit.record(tx, entry(actor, 'release.withdrawn', id, { reason }));
    });
    activity.publish({ topic: 'release', id, state: 'withdrawn', progress: 1 }, { roles: ['curator'] });
    return get(actor, id);
  }

  /** The archive, for whoever may see the release; a withdrawn one keeps its page and checksums, not its bytes. */
  function requireArchive(actor: Actor | null, id: string) {
    const { release, artifact } = requireView(actor, id);
    if (release.state === 'withdrawn')
      throw new ProblemError('gone', `This release was withdrawn: ${release.withdrawnReason ?? ''}`);
    if (!artifact || release.state === 'building' || release.state === 'failed')
      throw conflict('The archive of this release has not been built yet.');
    return artifact;
  }

  return { list, get, gates, create, publish, withdraw, requireArchive };
}

function requireValid(snapshot: ReleaseSnapshot): ReleaseSnapshot {
  const parsed = releaseSnapshotSchema.safeParse(snapshot);
  if (parsed.success) return parsed.data;
  throw conflict(
    `It cannot be released as it is. ${parsed.error.issues.map((issue) => issue.message).join(' ')}`,
  );
}

function entry(actor: Actor, action: string, id: string, detail: Record<string, unknown>) {
  return { personId: actor.id, action, subjectType: 'Release', subjectId: id, detail };
}
