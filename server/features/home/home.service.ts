import type { Home, HomeSection } from '../../../shared/contract/home.ts';
import { labsWhere, type Actor } from '../../../shared/policy/actor.ts';
import { decidableRecordings } from '../../authorize/decidable-recordings.ts';
import type { Ground } from '../../ground.ts';
import { toInstant } from '../../services/clock.ts';
import { passWords } from './pass-words.ts';
import {
  selectFailed,
  selectInMeasuring,
  selectInPreparation,
  selectOpenPasses,
  selectOpenUploads,
  selectOverduePasses,
  selectOwnHeld,
  selectToDecide,
  selectUnassigned,
  type RecordingRowOfHome,
  type Waiting,
} from './home.queries.ts';

export type HomeService = ReturnType<typeof createHomeService>;

/** What waits for this person, by the roles they hold; an empty section says that nothing does. */
export function createHomeService({ db, clock }: Pick<Ground, 'db' | 'clock'>) {
  function get(actor: Actor): Home {
    const ownLabs = labsWhere(actor, 'contributor');
    return {
      sections: [
        ...(labsWhere(actor, 'reviewer').length > 0 ? [toDecide(actor)] : []),
        ...(actor.roles.includes('labeler') ? [myPasses(actor)] : []),
        ...(ownLabs.length > 0 ? [myUploads(actor), heldMine(actor), failedMeasurements(ownLabs)] : []),
        ...(actor.roles.includes('curator') ? [overduePasses(), toAssign(), inPreparation()] : []),
      ],
    };
  }

  function toDecide(actor: Actor): HomeSection {
    const waiting = selectToDecide(db, decidableRecordings(actor), actor.id);
    return section('to-decide', waiting, (row) =>
      recordingItem(row, `/reviews/${row.id}`, `held, ${row.runTitle}`),
    );
  }

  function myPasses(actor: Actor): HomeSection {
    return section('my-passes', selectOpenPasses(db, actor.id), (row) => ({
      id: row.id,
      title: row.fileName,
      detail: `${row.runTitle}, ${passWords(row, clock.nowMs())}`,
      href: `/bench/${row.recordingId}?pass=${row.id}`,
      at: row.pass.dueAtMs === null ? null : toInstant(row.pass.dueAtMs),
    }));
  }

  function overduePasses(): HomeSection {
    return section('overdue-passes', selectOverduePasses(db, clock.nowMs()), (row) => ({
      id: row.id,
      title: row.fileName,
      detail: `${row.labelerName}, overdue since`,
      href: `/recordings/${row.recordingId}`,
      at: row.pass.dueAtMs === null ? null : toInstant(row.pass.dueAtMs),
    }));
  }

  /** Bytes on their way first, then what is being measured. */
  function myUploads(actor: Actor): HomeSection {
    const open = selectOpenUploads(db, actor.id);
    const measuring = selectInMeasuring(db, actor.id);
    const items = [
      ...open.rows.map((row) => ({
        id: row.id,
        title: row.fileName,
        detail: `not all bytes have arrived, ${row.runTitle}`,
        href: `/bring-in?run=${row.runId}`,
        at: toInstant(row.atMs),
      })),
      ...measuring.rows.map((row) =>
        recordingItem(
          row,
          `/recordings/${row.id}`,
          row.processing === 'queued' ? 'waits to be measured' : 'is being measured',
        ),
      ),
    ];
    return { key: 'my-uploads', total: open.total + measuring.total, items: items.slice(0, 10) };
  }

  function heldMine(actor: Actor): HomeSection {
    return section('held-mine', selectOwnHeld(db, actor.id), (row) =>
      recordingItem(row, `/recordings/${row.id}`, `waits for a reviewer of your lab, ${row.runTitle}`),
    );
  }

  function failedMeasurements(labIds: readonly string[]): HomeSection {
    return section('failed-measurements', selectFailed(db, labIds), (row) =>
      recordingItem(row, `/recordings/${row.id}`, row.failure ?? 'could not be measured'),
    );
  }

  function toAssign(): HomeSection {
    return section('to-assign', selectUnassigned(db), (row) =>
      recordingItem(row, `/recordings/${row.id}`, `nobody marks it yet, ${row.runTitle}`),
    );
  }

  function inPreparation(): HomeSection {
    return section('releases-in-preparation', selectInPreparation(db), (row) => ({
      id: row.id,
      title: `${row.title} ${row.version}`,
      detail: stateWords[row.state],
      href: `/releases/${row.id}`,
      at: toInstant(row.atMs),
    }));
  }

  return { get };
}

const stateWords = {
  building: 'is being built',
  built: 'is built and verified, and can be published',
  failed: 'could not be built',
  published: 'is published',
  withdrawn: 'was withdrawn',
};

function section<Row>(
  key: HomeSection['key'],
  { total, rows }: Waiting<Row>,
  toItem: (row: Row) => HomeSection['items'][number],
): HomeSection {
  return { key, total, items: rows.map(toItem) };
}

function recordingItem(row: RecordingRowOfHome, href: string, detail: string): HomeSection['items'][number] {
  return {
    id: row.id,
    title: row.fileName,
    detail,
    href,
    at: row.atMs === null ? null : toInstant(row.atMs),
  };
}
