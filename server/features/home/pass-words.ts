import { likelyMinutes } from '../../../shared/domain/pass-effort.ts';
import { partOfPass } from '../../../shared/domain/pass-windows.ts';
import { samplesIn } from '../../../shared/domain/span-set.ts';
import type { PassRowOfHome } from './home.queries.ts';

/** "12 windows, blind, likely 14 min, due": the time follows. Minutes of anything but rounds hang on lengths alone. */
export function passWords(row: PassRowOfHome, nowMs: number): string {
  const minutes = minutesOf(row);
  return [
    ...kindOf(row),
    ...(minutes === null ? [] : [`likely ${minutes} min`]),
    ...dueOf(row.pass.dueAtMs, nowMs),
  ].join(', ');
}

function kindOf({ pass: { task, kind, windows, blind } }: PassRowOfHome): string[] {
  if (task === 'phases') return ['growth phases without the sound'];
  if (kind === 'rounds') return ['rounds of candidates'];
  const part = windows === null ? 'whole recording' : `${windows.length} windows`;
  return [part, blind ? 'blind' : 'candidates shown'];
}

function minutesOf({ pass, frames, sampleRateHz, channels, candidateCount }: PassRowOfHome): number | null {
  const { task, kind, windows } = pass;
  return likelyMinutes({
    ...{ task, kind, channels },
    partS: samplesIn(partOfPass(windows, frames)) / sampleRateHz,
    windows: windows?.length ?? 0,
    candidates: kind === 'rounds' ? candidateCount : null,
  });
}

function dueOf(dueAtMs: number | null, nowMs: number): string[] {
  if (dueAtMs === null) return [];
  return [dueAtMs < nowMs ? 'overdue since' : 'due'];
}
