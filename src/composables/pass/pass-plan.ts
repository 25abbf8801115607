import type { PassKind, PassTask, WindowsOrder } from '@shared/contract/passes.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import { likelyMinutes } from '@shared/domain/pass-effort.ts';
import { countForShare, windowsFault } from '@shared/domain/pass-windows.ts';
import { windowsWords } from '@/composables/pass/pass-part.ts';
import { formatDuration } from '@/composables/useFormat.ts';

export type RecordingFacts = Pick<Recording, 'frames' | 'sampleRateHz' | 'channels' | 'candidateCount'>;

/** Shares that can be chosen; with `number` the windows are counted instead. */
export const WINDOW_SHARES = ['0.05', '0.1', '0.2', '0.5', 'number'] as const;
export type WindowShare = (typeof WINDOW_SHARES)[number];

export interface WindowFields {
  lengthS: number | null;
  share: WindowShare;
  count: number | null;
}

/** Number and length as they are sent; `null` while a field is empty. */
export function windowsOrder(
  { lengthS, share, count }: WindowFields,
  facts: RecordingFacts,
): WindowsOrder | null {
  if (lengthS === null || lengthS <= 0) return null;
  if (share === 'number') return count === null ? null : { count, lengthS };
  const windowSamples = Math.max(1, Math.round(lengthS * facts.sampleRateHz));
  return { count: countForShare({ frames: facts.frames, windowSamples }, Number(share)), lengthS };
}

/** What will be drawn, or why it cannot be. */
export function orderWords(order: WindowsOrder | null, facts: RecordingFacts): string {
  if (order === null) return 'Number and length are needed.';
  const windowSamples = Math.round(order.lengthS * facts.sampleRateHz);
  const fault = windowsFault({ frames: facts.frames, count: order.count, windowSamples });
  if (fault) return `This cannot be drawn: ${fault}.`;
  const share = (order.count * windowSamples) / facts.frames;
  const words = windowsWords({ ...order, share }, formatDuration);
  return `${words}. One is drawn at random in each of as many equal parts, whatever was found there.`;
}

export interface PassChoice {
  task: PassTask;
  kind: PassKind;
  windows: WindowsOrder | null;
}

export function minutesOf({ task, kind, windows }: PassChoice, facts: RecordingFacts): number | null {
  const wholeS = facts.frames / facts.sampleRateHz;
  return likelyMinutes({
    ...{ task, kind, channels: facts.channels, candidates: facts.candidateCount },
    partS: windows === null ? wholeS : Math.min(wholeS, windows.count * windows.lengthS),
    windows: windows?.count ?? 0,
  });
}
