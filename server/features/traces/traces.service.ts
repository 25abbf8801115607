import { link, rm } from 'node:fs/promises';
import { Readable } from 'node:stream';
import { maximumTraceBytes, type ReadTrace } from '../../../shared/domain/trace-table.ts';
import { temperatureUnitOf } from '../../../shared/domain/temperature-unit.ts';
import type { CreatedTrace, CreateTrace, PatchTrace, Trace } from '../../../shared/contract/traces.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, forbidden, invalidField, ProblemError } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { RunsService } from '../runs/runs.service.ts';
import { hashFile } from '../uploads/hash-file.ts';
import type { UploadFolder } from '../uploads/upload-folder.ts';
import { plainFileName } from '../uploads/plain-file-name.ts';
import { extremesOf, readTraceFile, toPointBytes } from './read-trace-file.ts';
import { isEditor, requireEditable, requireTrace, type BlindOnRun } from './trace-access.ts';
import { toTrace } from './traces.map.ts';
import { insertTrace, selectTraces, updateTrace, type TraceRow, type TraceView } from './traces.queries.ts';

interface TracesParts extends Pick<Ground, 'db' | 'clock' | 'ids' | 'store'> {
  audit: AuditService;
  runs: RunsService;
  passes: BlindOnRun;
  folder: UploadFolder;
}

/** A table that lies at the place that `admit` gave, and what was told with it. */
export interface BroughtTable {
  path: string;
  fileName: string;
  sizeBytes: number;
  trace: CreateTrace;
}

export type TracesService = ReturnType<typeof createTracesService>;

export function createTracesService({ db, clock, ids, store, audit, runs, passes, folder }: TracesParts) {
  function list(actor: Actor, runId: string): { items: Trace[] } {
    runs.get(actor, runId);
    if (passes.isBlindOnRun(db, actor, runId)) return { items: [] };
    return { items: selectTraces(db, runId).map((view) => toTraceFor(actor, view)) };
  }

  function get(actor: Actor, id: string): Trace {
    return toTraceFor(actor, requireTrace(db, actor, id, { passes }));
  }

  /** Before the bytes are read: a run that the person may add to, a size that is taken, and room. */
  async function admit(
    actor: Actor,
    runId: string,
    announcedBytes: number,
  ): Promise<{ name: string; path: string }> {
    requireRun(actor, runId);
    // The form around the table takes some bytes as well.
    if (announcedBytes > maximumTraceBytes + 100_000)
      throw new ProblemError('too-large', 'A table of a trace may have 50 MB at most.');
    await folder.requireRoom(announcedBytes);
    const name = `form-${ids.next()}`;
    return { name, path: folder.pathOf(name) };
  }

  /** Reads the table whole, makes it and its points durable, and only then writes the row. */
  async function create(actor: Actor, runId: string, table: BroughtTable): Promise<CreatedTrace> {
    requireRun(actor, runId);
    const read = await readTraceFile(table.path, table.trace.mapping);
    const sha256 = await storeTable(table.path);
    const points = await store.putStream(Readable.from([toPointBytes(read)]));
    const row = toRow(actor, runId, { table, read, sha256, pointsSha256: points.sha256 });
    write(db, (tx) => {
      const { labId } = requireRun(actor, runId);
      insertTrace(tx, row);
      audit.record(tx, entry(actor, 'trace.added', { row, labId }));
    });
    return { ...get(actor, row.id), notes: read.notes };
  }

  /** A second name for the bytes goes into the store, so that a crash before the commit loses nothing. */
  async function storeTable(path: string): Promise<string> {
    const sha256 = await hashFile(path);
    const incoming = store.tempPath();
    await link(path, incoming);
    try {
      await store.putFile(incoming, sha256);
    } finally {
      await rm(incoming, { force: true });
    }
    return sha256;
  }

  function toRow(
    actor: Actor,
    runId: string,
    found: { table: BroughtTable; read: ReadTrace; sha256: string; pointsSha256: string },
  ): TraceRow {
    const { table, read, sha256, pointsSha256 } = found;
    const { name, quantity, mapping, runOffsetNs, clockPpm } = table.trace;
    const now = clock.nowMs();
    const unit = plainUnit(mapping.unit, quantity);
    const stamps = { createdById: actor.id, createdAtMs: now, updatedAtMs: now, deletedAtMs: null };
    return {
      id: ids.next(),
      runId,
      name,
      quantity,
      unit,
      fileName: plainFileName(table.fileName, 'trace.csv'),
      sha256,
      sizeBytes: table.sizeBytes,
      mapping: { ...mapping, unit },
      pointsSha256,
      points: read.timesS.length,
      durationS: read.timesS.at(-1)!,
      ...extremesOf(read.values),
      runOffsetNs,
      clockPpm,
      ...stamps,
      revision: 1,
    };
  }

  function change(actor: Actor, id: string, revision: number, input: PatchTrace): Trace {
    write(db, (tx) => {
      const view = requireEditable(tx, actor, id, { passes });
      requireSameRevision(revision, view.trace.revision, toTraceFor(actor, view));
      const quantity = input.quantity ?? view.trace.quantity;
      const unit = plainUnit(input.unit ?? view.trace.unit, quantity);
      updateTrace(tx, view.trace, { ...input, unit, updatedAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'trace.changed', { row: view.trace, labId: view.labId }));
    });
    return get(actor, id);
  }

  function remove(actor: Actor, id: string, revision: number): void {
    write(db, (tx) => {
      const view = requireEditable(tx, actor, id, { passes });
      requireSameRevision(revision, view.trace.revision, toTraceFor(actor, view));
      mark(tx, actor, view, { action: 'trace.removed', deletedAtMs: clock.nowMs() });
    });
  }

  /** Takes a removal back; `revision` is that of the trace after it was removed. */
  function restore(actor: Actor, id: string, revision: number): Trace {
    write(db, (tx) => {
      const view = requireEditable(tx, actor, id, { passes, deleted: true });
      requireSameRevision(revision, view.trace.revision, toTraceFor(actor, view));
      mark(tx, actor, view, { action: 'trace.restored', deletedAtMs: null });
    });
    return get(actor, id);
  }

  function mark(
    tx: Tx,
    actor: Actor,
    { trace, labId }: TraceView,
    { action, deletedAtMs }: { action: string; deletedAtMs: number | null },
  ): void {
    updateTrace(tx, trace, { deletedAtMs, updatedAtMs: clock.nowMs() });
    audit.record(tx, entry(actor, action, { row: trace, labId }));
  }

  /** The table as it came. */
  function file(actor: Actor, id: string): { path: string; sha256: string; fileName: string } {
    const { trace } = requireTrace(db, actor, id, { passes });
    return { path: store.pathOf(trace.sha256), sha256: trace.sha256, fileName: trace.fileName };
  }

  function requireRun(actor: Actor, runId: string): { id: string; labId: string } {
    runs.get(actor, runId);
    const run = runs.findOwn(db, actor, runId);
    if (run === undefined) throw forbidden('Only the contributors of its lab may add traces to a run.');
    if (passes.isBlindOnRun(db, actor, runId))
      throw conflict(
        'You have an open blind pass on a recording of this run; finish it before you add traces.',
      );
    return run;
  }

  return { list, get, admit, create, change, remove, restore, file, removeFile: folder.remove };
}

function toTraceFor(actor: Actor, { trace, labId }: TraceView): Trace {
  return toTrace(trace, isEditor(actor, labId));
}

/** Temperatures are counted with, so their unit is one of three; every other is text. */
function plainUnit(unit: string, quantity: TraceRow['quantity']): string {
  if (quantity !== 'temperature') return unit;
  const known = temperatureUnitOf(unit);
  if (known === null) throw invalidField('unit', 'of a temperature is °C, K or °F');
  return known;
}

function entry(actor: Actor, action: string, { row, labId }: { row: TraceRow; labId: string }) {
  const subject = { subjectType: 'Trace', subjectId: row.id, labId };
  return { personId: actor.id, action, ...subject, detail: { runId: row.runId, name: row.name } };
}
