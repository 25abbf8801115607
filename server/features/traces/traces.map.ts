import type { Trace } from '../../../shared/contract/traces.ts';
import { toInstant } from '../../services/clock.ts';
import type { TraceRow } from './traces.queries.ts';

export function toTrace(row: TraceRow, editable: boolean): Trace {
  return {
    id: row.id,
    runId: row.runId,
    name: row.name,
    quantity: row.quantity,
    unit: row.unit,
    fileName: row.fileName,
    sha256: row.sha256,
    sizeBytes: row.sizeBytes,
    mapping: row.mapping,
    points: row.points,
    durationS: row.durationS,
    minimum: row.minimum,
    maximum: row.maximum,
    runOffsetNs: row.runOffsetNs,
    clockPpm: row.clockPpm,
    createdAt: toInstant(row.createdAtMs),
    revision: row.revision,
    editable,
  };
}
