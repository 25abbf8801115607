import type { Pass } from '@shared/contract/passes.ts';
import { formatCount } from '@/composables/useFormat.ts';

/** What kind of pass it is, for a pill: "12 windows, blind". */
export function kindWords({
  task,
  kind,
  windows,
  blind,
}: Pick<Pass, 'task' | 'kind' | 'windows' | 'blind'>): string {
  if (task === 'phases')
    return blind ? 'growth phases, without the sound, blind' : 'growth phases, without the sound';
  const sight = blind ? 'blind' : 'candidates shown';
  if (kind === 'windows') return `${formatCount(windows?.length ?? 0, 'window')}, ${sight}`;
  if (kind === 'rounds') return 'rounds of candidates';
  return `whole recording, ${sight}`;
}

/** "about 14 min", "about 2 h 10 min" */
export function minutesWords(minutes: number | null): string | null {
  if (minutes === null) return null;
  if (minutes < 90) return `about ${minutes} min`;
  const rest = Math.round((minutes % 60) / 10) * 10;
  const hours = Math.floor(minutes / 60) + (rest === 60 ? 1 : 0);
  return rest === 0 || rest === 60 ? `about ${hours} h` : `about ${hours} h ${rest} min`;
}

export function isOverdue({ state, dueAt }: Pick<Pass, 'state' | 'dueAt'>, nowMs: number): boolean {
  return state === 'assigned' && dueAt !== null && Date.parse(dueAt) < nowMs;
}
