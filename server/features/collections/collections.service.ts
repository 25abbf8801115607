import type {
  AddItems,
  Collection,
  CollectionItem,
  ListCollectionsQuery,
  SaveCollection,
} from '../../../shared/contract/collections.ts';
import { toTotal, type Page, type PageQuery } from '../../../shared/contract/page.ts';
import type { RecordingListItem } from '../../../shared/contract/recordings.ts';
import type { Licence } from '../../../shared/contract/licence.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Reader } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { invalidField, notFound } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import { toInstant } from '../../services/clock.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { toCollection } from './collections.map.ts';
import {
  countCollections,
  deleteItem,
  insertCollection,
  insertItems,
  selectCollection,
  selectCollectionIdBySlug,
  selectCollections,
  selectItems,
  selectMemberIds,
  selectMembers,
  updateCollection,
  type CollectionView,
  type ItemView,
} from './collections.queries.ts';

/** No count of marks is told of one that the asking person marks blind. */
type CollectableRecording = RecordingListItem & { licence: Licence; isWithheld: boolean };

/** What collecting asks of the recordings feature: only recordings the person may see, only while they are shared. */
export interface CollectableRecordings {
  sharedByIds(actor: Actor, ids: readonly string[]): CollectableRecording[];
  sharedIdsByFilter(actor: Actor, filter: NonNullable<AddItems['filter']>): string[];
}

export type CollectionRow = CollectionView['collection'];

interface CollectionsParts extends Pick<Ground, 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  recordings: CollectableRecordings;
}

export type CollectionsService = ReturnType<typeof createCollectionsService>;

export function createCollectionsService({ db, clock, ids, audit, recordings }: CollectionsParts) {
  function list(actor: Actor, { q, cursor, limit }: ListCollectionsQuery): Page<Collection> {
    requireCurator(actor, 'read', '');
    const rows = selectCollections(db, { q, after: readRowCursor(cursor), limit: limit + 1 });
    const { shown, nextCursor } = pageOf(rows, limit, placeOf);
    return { items: shown.map(toCollection), nextCursor, total: toTotal(countCollections(db, q)) };
  }

  function requireView(reader: Reader, actor: Actor, id: string): CollectionView {
    requireCurator(actor, 'read', id);
    const view = selectCollection(reader, id);
    if (!view) throw notFound('This collection');
    return view;
  }

  function get(actor: Actor, id: string): Collection {
    return toCollection(requireView(db, actor, id));
  }

  function create(actor: Actor, input: SaveCollection): Collection {
    requireCurator(actor, 'create', '');
    const id = ids.next();
    write(db, (tx) => {
      requireFreeSlug(tx, input.slug, id);
      insertCollection(tx, { ...input, id, createdById: actor.id, createdAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'collection.created', id, { slug: input.slug }));
    });
    return get(actor, id);
  }

  function update(actor: Actor, id: string, revision: number, input: SaveCollection): Collection {
    write(db, (tx) => {
      const view = requireView(tx, actor, id);
      requireSameRevision(revision, view.collection.revision, toCollection(view));
      requireUnchangedSlug(view, input.slug);
      requireFreeSlug(tx, input.slug, id);
      updateCollection(tx, id, revision, input);
      audit.record(tx, entry(actor, 'collection.updated', id));
    });
    return get(actor, id);
  }

  function listItems(actor: Actor, id: string, { cursor, limit }: PageQuery): Page<CollectionItem> {
    const view = requireView(db, actor, id);
    const rows = selectItems(db, id, { after: readRowCursor(cursor), limit: limit + 1 });
    const { shown, nextCursor } = pageOf(rows, limit, itemPlaceOf);
    return { items: withRecordings(actor, shown), nextCursor, total: toTotal(view.itemCount) };
  }

  /** A member that is no longer shared is left out here; the gates tell that it is there. */
  function withRecordings(actor: Actor, items: readonly ItemView[]): CollectionItem[] {
    const found = recordings.sharedByIds(
      actor,
      items.map((item) => item.recordingId),
    );
    const byId = new Map(found.map((recording) => [recording.id, recording]));
    return items.flatMap(({ recordingId, finishedPasses, eventCount, addedAtMs }) => {
      const found = byId.get(recordingId);
      if (!found) return [];
      const { isWithheld, ...recording } = found;
      const counts = { finishedPasses, eventCount: isWithheld ? null : eventCount };
      return [{ ...recording, ...counts, addedAt: toInstant(addedAtMs) }];
    });
  }

  function addItems(actor: Actor, id: string, input: AddItems): { added: number; alreadyIn: number } {
    requireView(db, actor, id);
    const wanted = input.recordingIds
      ? recordings.sharedByIds(actor, input.recordingIds).map((recording) => recording.id)
      : recordings.sharedIdsByFilter(actor, input.filter ?? {});
    requireAllFound(input, wanted);
    return write(db, (tx) => {
      const present = new Set(selectMemberIds(tx, id, wanted));
      const fresh = wanted.filter((recordingId) => !present.has(recordingId));
      const addedAtMs = clock.nowMs();
      insertItems(
        tx,
        fresh.map((recordingId) => ({ collectionId: id, recordingId, addedAtMs })),
      );
      audit.record(tx, entry(actor, 'collection.items-added', id, { added: fresh.length }));
      return { added: fresh.length, alreadyIn: present.size };
    });
  }

  function removeItem(actor: Actor, id: string, recordingId: string): void {
    write(db, (tx) => {
      requireView(tx, actor, id);
      if (!deleteItem(tx, id, recordingId)) throw notFound('This recording of the collection');
      audit.record(tx, entry(actor, 'collection.item-removed', id, { recordingId }));
    });
  }

  function requireFreeSlug(reader: Reader, slug: string, id: string): void {
    const holder = selectCollectionIdBySlug(reader, slug);
    if (holder !== undefined && holder !== id) throw invalidField('slug', 'is taken by another collection');
  }

  return {
    list,
    get,
    create,
    update,
    listItems,
    addItems,
    removeItem,
    requireView,
    members: (reader: Reader, id: string) => selectMembers(reader, id),
  };
}

function requireCurator(actor: Actor, action: 'read' | 'create', id: string): void {
  authorize(actor, { action, name: 'Collection', row: { id } });
}

/** Archives and citations carry the short name, so it stays once a version was published. */
function requireUnchangedSlug(view: CollectionView, slug: string): void {
  if (view.latestVersion !== null && slug !== view.collection.slug)
    throw invalidField('slug', 'stays as it is once a version was published');
}

function requireAllFound(input: AddItems, found: readonly string[]): void {
  const asked = new Set(input.recordingIds ?? found);
  if (asked.size > found.length)
    throw invalidField(
      'recordingIds',
      `${asked.size - found.length} of them are not shared, or do not exist`,
    );
}

function placeOf({ collection }: CollectionView): RowPlace {
  return { key: collection.createdAtMs, id: collection.id };
}

function itemPlaceOf(item: ItemView): RowPlace {
  return { key: item.addedAtMs, id: item.recordingId };
}

function entry(actor: Actor, action: string, id: string, detail: Record<string, unknown> = {}) {
  return { personId: actor.id, action, subjectType: 'Collection', subjectId: id, detail };
}
