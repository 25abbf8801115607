import type { EventClass } from '../../../shared/contract/schemes.ts';
import type { PassTask, PassWindow } from '../../../shared/contract/passes.ts';
import { spanFault } from '../../../shared/domain/event-span.ts';
import { holdsSample } from '../../../shared/domain/span-set.ts';
import { conflict, invalidField } from '../../http/problem.ts';
import type { EventRow } from './events.queries.ts';

export interface MarkLimits {
  frames: number;
  channels: number;
  nyquistHz: number;
  classes: readonly EventClass[];
}

/** Throws with the field and a sentence where the mark does not fit its recording or the scheme of its pass. */
export function checkMark(mark: EventRow, limits: MarkLimits): void {
  const fault = spanFault(mark, limits.frames);
  if (fault) throw invalidField('endSample', fault);
  if (mark.channel >= limits.channels) throw invalidField('channel', 'is not a channel of this recording');
  checkBand(mark, limits.nyquistHz);
  if (!limits.classes.some((item) => item.key === mark.classKey))
    throw invalidField('classKey', 'is not a class of the label scheme of this pass');
}

export interface MarkedPass {
  task: PassTask;
  windows: PassWindow[] | null;
  schemeVersion: number;
}

/** What counts is where a mark begins: an event at the edge of a window then belongs to one window or to none. */
export function checkPart(
  { startSample }: Pick<EventRow, 'startSample'>,
  { task, windows }: MarkedPass,
): void {
  if (task === 'phases')
    throw conflict('In this pass growth phases are marked; events are marked in a pass that has the sound.');
  if (windows !== null && !holdsSample(windows, startSample))
    throw invalidField('startSample', 'lies outside the windows of this pass');
}

function checkBand({ lowHz, highHz }: EventRow, nyquistHz: number): void {
  if (lowHz !== null && highHz !== null && lowHz >= highHz)
    throw invalidField('highHz', 'must lie above lowHz');
  if ((lowHz ?? 0) > nyquistHz) throw invalidField('lowHz', 'lies above half the sample rate');
  if ((highHz ?? 0) > nyquistHz) throw invalidField('highHz', 'lies above half the sample rate');
}
