import type { Recalescences, TracePointsAnswer, TracePointsQuery } from '../../../shared/contract/traces.ts';
import {
  temperatureUnitOf,
  toCelsius,
  type TemperatureUnit,
} from '../../../shared/domain/temperature-unit.ts';
import { runTimeNsOf } from '../../../shared/domain/trace-clock.ts';
import { fewerPoints } from '../../../shared/domain/trace-steps.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { findRecalescences } from '../../signal/recalescence.ts';
import type { RunsService } from '../runs/runs.service.ts';
import { noProposalWords, toProposal } from './recalescence-words.ts';
import { readStoredPoints, spanOnTrace } from './stored-points.ts';
import { requireTrace, type BlindOnRun } from './trace-access.ts';
import type { TraceRow } from './traces.queries.ts';
import { meltingPointOf } from './water-run.ts';

type Parts = Pick<Ground, 'db' | 'store'> & { passes: BlindOnRun; runs: RunsService };

export type TracePointsService = ReturnType<typeof createTracePointsService>;

export function createTracePointsService({ db, store, passes, runs }: Parts) {
  async function points(actor: Actor, id: string, query: TracePointsQuery): Promise<TracePointsAnswer> {
    const { trace } = requireTrace(db, actor, id, { passes });
    const { total, ...all } = await readStoredPoints(store, trace.pointsSha256, spanOnTrace(trace, query));
    const shown = fewerPoints(all, query.points);
    return {
      traceId: id,
      total,
      isReduced: shown.timesS.length < all.timesS.length,
      runTimesNs: Array.from(shown.timesS, (timeS) => runTimeNsOf(timeS, trace)),
      values: [...shown.values],
    };
  }

  /** Offered, never set: a person decides whether it is the nucleation. */
  async function recalescence(actor: Actor, id: string): Promise<Recalescences> {
    const { trace } = requireTrace(db, actor, id, { passes });
    const unit = trace.quantity === 'temperature' ? temperatureUnitOf(trace.unit) : null;
    if (unit === null)
      return { traceId: id, proposals: [], remarks: ['Recalescence is looked for in temperatures only.'] };
    const melting = meltingPointOf(runs.get(actor, trace.runId));
    const { found, reason } = findRecalescences(await inCelsius(trace, unit), melting.meltingPointC);
    if (reason !== null) return { traceId: id, proposals: [], remarks: [noProposalWords(reason, melting)] };
    return {
      traceId: id,
      proposals: found.map((jump) => toProposal(jump, trace, melting)),
      remarks: [
        'Times and temperatures are those of the sensor: its lag delays the onset by up to its time constant and is not taken off.',
        ...melting.remarks,
      ],
    };
  }

  async function inCelsius({ pointsSha256 }: TraceRow, unit: TemperatureUnit) {
    const { timesS, values } = await readStoredPoints(store, pointsSha256);
    return { timesS, values: values.map((value) => toCelsius(value, unit)) };
  }

  return { points, recalescence };
}
