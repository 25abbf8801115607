import { toTotal, type Page } from '../../../shared/contract/page.ts';
import type {
  CaptureSegment,
  ListRecordingsQuery,
  Recording,
  RecordingListItem,
} from '../../../shared/contract/recordings.ts';
import { isForReviewersAlone } from '../../../shared/domain/recording-status.ts';
import { abilityFor, may } from '../../../shared/policy/ability.ts';
import { labsOf, type Actor } from '../../../shared/policy/actor.ts';
import { visibleRecordings } from '../../authorize/visible-recordings.ts';
import { selectWithheld, withheldOf, type Withheld } from '../../authorize/withheld.ts';
import type { Reader, Tx } from '../../db/client.ts';
import type { RowPlace } from '../../db/row-place.ts';
import type { Ground } from '../../ground.ts';
import { forbidden, notFound } from '../../http/problem.ts';
import { pageOf, readRowCursor } from '../../http/row-cursor.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { selectLikenesses } from './likeness.queries.ts';
import { toListItem, toRecording, toSegment, type Standing } from './recordings.map.ts';
import {
  countEvents,
  countRecordings,
  hasOpenEventsPass,
  insertFindings,
  insertRecording,
  selectFindings,
  selectNewestMeasurement,
  selectRecording,
  selectRecordingRow,
  selectRecordings,
  type FindingRow,
  type RecordingListView,
  type RecordingRow,
  type RecordingView,
} from './recordings.queries.ts';
import { countSegments, insertSegments, selectSegments, type SegmentRow } from './segments.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids' | 'jobs'> & { audit: AuditService };

export type RecordingsService = ReturnType<typeof createRecordingsService>;

/** A recording as the bytes and the declaration tell it, before anything is measured. */
export type NewRecording = Pick<
  RecordingRow,
  | ('id' | 'runId' | 'labId' | 'setupId' | 'uploadedById' | 'fileName' | 'sizeBytes' | 'sha256' | 'format')
  | ('licence' | 'sensitivity' | 'note' | 'runOffsetNs' | 'timeExpansion' | 'layout')
  | ('liveTimeNs' | 'camera')
>;
export type NewSegment = Omit<SegmentRow, 'id' | 'recordingId'>;
export type NewFinding = Pick<FindingRow, 'kind' | 'sentence' | 'place'>;

export interface NewParts {
  findings: readonly NewFinding[];
  segments: readonly NewSegment[];
}

export interface RecordingAccess {
  row: RecordingRow;
  /** True while an open blind pass forbids candidates, counts and rates. */
  blind: boolean;
  /** True while this person marks growth phases without the sound; see `requireSound`. */
  isSoundWithheld: boolean;
}

export function createRecordingsService({ db, clock, ids, jobs, audit }: Parts) {
  function list(actor: Actor, query: ListRecordingsQuery): Page<RecordingListItem> {
    const { cursor, limit, ...asked } = query;
    const filters = { ...asked, askedById: actor.id };
    const visible = visibleRecordings(actor);
    const rows = selectRecordings(db, { filters, visible, after: readRowCursor(cursor), limit: limit + 1 });
    const { shown, nextCursor } = pageOf(rows, limit, placeOf);
    const ids = shown.map(({ recording }) => recording.id);
    const withheld = selectWithheld(db, actor, ids);
    const items = shown.map((view) => toListItem(view, withheld.get(view.recording.id)?.blind ?? false));
    return { items, nextCursor, total: toTotal(countRecordings(db, filters, visible)) };
  }

  function get(actor: Actor, id: string): Recording {
    const view = selectRecording(db, id, visibleRecordings(actor));
    if (view === undefined) throw notFound('This recording');
    return toRecording(view, standingOf(db, actor, view));
  }

  /** Throws the same 404 for what is missing and for what the person may not see. */
  function requireVisible(actor: Actor, id: string): RecordingAccess {
    const row = selectRecordingRow(db, id, visibleRecordings(actor));
    if (row === undefined) throw notFound('This recording');
    const { blind, sound } = withheldOf(db, actor, id);
    return { row, blind, isSoundWithheld: sound };
  }

  /** Where the segments of a capture set lie and when they were taken; none of any other recording. */
  function listSegments(actor: Actor, id: string): { items: CaptureSegment[] } {
    const { row } = requireSound(requireVisible(actor, id));
    return { items: selectSegments(db, row.id).map(toSegment) };
  }

  /** Writes a new recording, its parts and the job that measures it, in the transaction of whoever brings it in. */
  function add(tx: Tx, recording: NewRecording, parts: NewParts): void {
    const now = clock.nowMs();
    insertRecording(tx, {
      ...recording,
      processing: 'queued',
      sharing: 'pending',
      createdAtMs: now,
      updatedAtMs: now,
    });
    const recordingId = recording.id;
    insertFindings(
      tx,
      parts.findings.map((finding) => ({ ...finding, recordingId, foundAtMs: now, id: ids.next() })),
    );
    insertSegments(
      tx,
      parts.segments.map((segment) => ({ ...segment, recordingId, id: ids.next() })),
    );
    jobs.enqueue(tx, { kind: 'measure', payload: { recordingId: recording.id } });
    const { sha256, sizeBytes, runId } = recording;
    audit.record(
      tx,
      entry(recording.uploadedById, 'recording.brought-in', recording, { sha256, sizeBytes, runId }),
    );
  }

  return { list, get, requireVisible, listSegments, add };
}

function placeOf({ recording }: RecordingListView): RowPlace {
  return { key: recording.createdAtMs, id: recording.id };
}

/** For every answer that is made from the samples: refused to whoever marks growth phases without them. */
export function requireSound<Access extends RecordingAccess>(access: Access): Access {
  if (!access.isSoundWithheld) return access;
  throw forbidden(
    'The sound of this run is kept back while you mark its growth phases from camera and temperature. It opens when that pass is finished.',
  );
}

function standingOf(db: Reader, actor: Actor, view: RecordingView): Standing {
  const { recording } = view;
  const ability = abilityFor(actor);
  const isMeasured = recording.processing === 'measured';
  const withheld = withheldOf(db, actor, recording.id);
  const canDecide = may(ability, 'decide', 'Recording', recording) && recording.uploadedById !== actor.id;
  const hasPass = hasOpenEventsPass(db, actor.id, recording.id);
  return {
    withheld,
    findings: findingsFor(db, actor, { recording, canDecide, withheld }),
    likenesses: withheld.sound ? [] : selectLikenesses(db, recording.id, visibleRecordings(actor)),
    eventCount: countEvents(db, recording.id),
    segmentCount: countSegments(db, recording.id),
    measurement: isMeasured ? (selectNewestMeasurement(db, recording.id)?.summary ?? null) : null,
    may: {
      // Whoever marks has to hear: a pass that shows the recording lets its bytes be played too.
      downloadAudio: !withheld.sound,
      decide: canDecide && recording.sharing === 'held',
      assign: isMeasured && may(ability, 'assign', 'Recording', recording),
      mark: isMeasured && recording.sharing === 'shared' && hasPass,
    },
  };
}

/** Told to the owning lab only. What a person who marked it has heard is withheld from whoever marks it blind. */
function findingsFor(
  db: Reader,
  actor: Actor,
  { recording, canDecide, withheld }: { recording: RecordingRow; canDecide: boolean; withheld: Withheld },
): FindingRow[] {
  if (withheld.sound || !labsOf(actor).includes(recording.labId)) return [];
  return selectFindings(db, recording.id).filter(
    (finding) =>
      (canDecide || !isForReviewersAlone(finding)) && !(withheld.blind && finding.kind === 'voice-marked'),
  );
}

function entry(
  personId: string,
  action: string,
  recording: Pick<RecordingRow, 'id' | 'labId'>,
  detail?: Record<string, unknown>,
) {
  const subject = { subjectType: 'Recording', subjectId: recording.id, labId: recording.labId };
  return { personId, action, ...subject, ...(detail === undefined ? {} : { detail }) };
}
