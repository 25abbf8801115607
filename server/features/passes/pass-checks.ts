import type { CreatePass, PassWindow } from '../../../shared/contract/passes.ts';
import { drawWindows, windowsFault } from '../../../shared/domain/pass-windows.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { isAllowed } from '../../authorize/authorize.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { conflict, invalidField, notFound } from '../../http/problem.ts';
import {
  selectAssignable,
  selectLabelers,
  selectOpenPassesOnRun,
  selectOpenPassOf,
  selectPassAndSharing,
  selectPassWithContext,
  type PassRow,
  type PassWithContext,
} from './passes.queries.ts';

export type Assignable = NonNullable<ReturnType<typeof selectAssignable>>;

export function requireAssignable(tx: Tx, actor: Actor, recordingId: string): Assignable {
  const recording = selectAssignable(tx, recordingId);
  if (!recording || !isAllowed(actor, { action: 'assign', name: 'Recording', row: recording }))
    throw notFound('This recording');
  if (recording.processing !== 'measured')
    throw conflict('A recording can be assigned once it has been measured.');
  return recording;
}

/** One open pass per person and recording: a second may follow once the first is finished or taken back. */
export function requireLabeler(tx: Tx, input: CreatePass, { runId }: Assignable): void {
  const isLabeler = selectLabelers(tx).some((person) => person.id === input.labelerId);
  if (!isLabeler) throw invalidField('labelerId', 'is nobody who marks recordings');
  if (selectOpenPassOf(tx, input.recordingId, input.labelerId))
    throw conflict('This person has an open pass on this recording already.');
  const others = selectOpenPassesOnRun(tx, runId, input.labelerId);
  if (others.some(({ task }) => task !== input.task))
    throw conflict(
      input.task === 'phases'
        ? 'This person hears this run in an open pass, so its growth phases cannot be marked without the sound. Finish that pass first, or ask somebody else.'
        : 'This person marks the growth phases of this run without its sound at the moment. Events can be marked once that pass is finished.',
    );
}

export function drawFor(input: CreatePass, { format }: Assignable, seed: number): PassWindow[] | null {
  if (input.windows === null) return null;
  const { frames, sampleRateHz } = format;
  const windowSamples = Math.round(input.windows.lengthS * sampleRateHz);
  const plan = { frames, count: input.windows.count, windowSamples };
  const fault = windowsFault(plan);
  if (fault) throw invalidField('windows', `cannot be drawn: ${fault}`);
  return drawWindows(plan, seed);
}

/** Marks are set, and a pass is finished, only by its labeler, while it is open and the recording is shared. */
export function requireOwnOpenPass(reader: Reader, actor: Actor, passId: string): PassRow {
  const found = selectPassAndSharing(reader, passId);
  const isOwn = found !== undefined && found.pass.labelerId === actor.id && found.pass.state !== 'cancelled';
  if (!isOwn || !actor.roles.includes('labeler') || found.sharing !== 'shared') throw notFound('This pass');
  if (found.pass.state === 'finished') throw conflict('This pass is finished; its marks stay as they are.');
  return found.pass;
}

/** The same, with what the pass is of; it counts marks, so it is not for each mark that is stored. */
export function requireOwnOpenView(reader: Reader, actor: Actor, passId: string): PassWithContext {
  const { id } = requireOwnOpenPass(reader, actor, passId);
  const view = selectPassWithContext(reader, id);
  if (!view) throw notFound('This pass');
  return view;
}
