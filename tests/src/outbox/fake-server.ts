import type { RecordingEvent } from '@shared/contract/events.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import type { MarkPlace, SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { SendAnswer } from '@/composables/outbox/outbox-sender.ts';
import { eventOf } from './outbox-fixtures.ts';

interface Row {
  event: RecordingEvent;
  ownerId: string;
  isDeleted: boolean;
}

/** Every form that a mark of the server had, with who brought it. */
export interface ServerWrite {
  id: string;
  mark: MarkFields | null;
  by: 'tab' | 'elsewhere';
}

/** What the interface of the server promises about marks, and nothing else of it. */
export function createFakeServer() {
  const rows = new Map<string, Row>();
  const writes: ServerWrite[] = [];
  const finishedPasses = new Set<string>();
  /** Whose cookie the browser has. */
  const session = { personId: null as string | null };
  const answerOf = (row: Row): SendAnswer => ({ kind: 'stored', event: row.event });

  function take(request: SaveRequest, place: MarkPlace): SendAnswer {
    if (session.personId !== place.personId) return { kind: 'signed-out' };
    const row = rows.get(request.id);
    if (request.kind === 'create') return create(request.id, request.mark, place, row);
    if (!row || row.ownerId !== place.personId) return { kind: 'refused', sentence: 'not found' };
    if (row.isDeleted)
      return request.kind === 'remove' ? { kind: 'removed' } : { kind: 'conflict', theirs: null };
    if (finishedPasses.has(place.passId)) return { kind: 'refused', sentence: 'The pass is finished.' };
    if (request.revision !== row.event.revision) return { kind: 'conflict', theirs: row.event };
    if (request.kind === 'change') return change(row, { ...fieldsOf(row.event), ...request.change }, 'tab');
    remove(row, 'tab');
    return { kind: 'removed' };
  }

  function create(id: string, mark: MarkFields, place: MarkPlace, row: Row | undefined): SendAnswer {
    if (row?.isDeleted) return { kind: 'conflict', theirs: null };
    if (row && isSame(fieldsOf(row.event), trimmed(mark))) return answerOf(row);
    if (finishedPasses.has(place.passId)) return { kind: 'refused', sentence: 'The pass is finished.' };
    if (row) return { kind: 'conflict', theirs: row.event };
    const made = {
      event: eventOf(id, 1, trimmed(mark), place.passId),
      ownerId: place.personId,
      isDeleted: false,
    };
    rows.set(id, made);
    writes.push({ id, mark: trimmed(mark), by: 'tab' });
    return answerOf(made);
  }

  function change(row: Row, mark: MarkFields, by: ServerWrite['by']): SendAnswer {
    const { id, revision, passId } = row.event;
    row.event = eventOf(id, revision + 1, trimmed(mark), passId);
    writes.push({ id, mark: trimmed(mark), by });
    return answerOf(row);
  }

  function remove(row: Row, by: ServerWrite['by']): void {
    row.event = { ...row.event, revision: row.event.revision + 1 };
    row.isDeleted = true;
    writes.push({ id: row.event.id, mark: null, by });
  }

  return {
    session,
    finishedPasses,
    writes,
    take,
    change,
    remove,
    live: (passId?: string) =>
      [...rows.values()].filter((row) => !row.isDeleted && (!passId || row.event.passId === passId)),
    ownerOf: (id: string) => rows.get(id)?.ownerId,
  };
}

function trimmed(mark: MarkFields): MarkFields {
  return { ...mark, note: mark.note.trim() };
}

function isSame(a: MarkFields, b: MarkFields): boolean {
  return JSON.stringify(fieldsOf(a)) === JSON.stringify(fieldsOf(b));
}

export type FakeServer = ReturnType<typeof createFakeServer>;
