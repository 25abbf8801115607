import type { RoundOrder } from '@shared/contract/passes.ts';
import type { RoundItem, RoundProgress } from '@shared/contract/rounds.ts';
import type { EventClass } from '@shared/contract/schemes.ts';
import { classTitle } from '@/composables/bench/mark-words.ts';
import type { Halt } from '@/composables/outbox/sending-loop.ts';
import { isUndecided } from '@/composables/rounds/answer-packet.ts';
import type { AnswerPacket } from '@/composables/rounds/answer-packet.ts';
import { answeredCount } from '@/composables/rounds/round-steps.ts';
import type { Said } from '@/composables/rounds/round-steps.ts';
import { HALT_WORDS } from '@/composables/bench/save-words.ts';
import type { SaveWords } from '@/composables/bench/save-words.ts';
import { formatCount, formatNumber } from '@/composables/useFormat.ts';

export const ORDER_OPTIONS: readonly { value: RoundOrder; label: string; hint: string }[] = [
  { value: 'time', label: 'By time', hint: 'As they happened.' },
  { value: 'strength', label: 'Strongest first', hint: 'By decibels above the noise.' },
  {
    value: 'uncertainty',
    label: 'Most uncertain first',
    hint: 'Near the threshold of the detector, or half above and half below 20 kHz. Every fourth is drawn at random.',
  },
  { value: 'likeness', label: 'Look-alikes together', hint: 'In groups, the largest and most alike first.' },
];

/** "no event", "crack", "crack, probable" */
export function sayingWords(said: Said | null, classes: readonly EventClass[]): string {
  if (!said) return 'not answered';
  if (said.verdict === 'no-event') return 'no event';
  if (said.verdict === 'undecided') return 'undecided';
  const title = classTitle(said.classKey ?? '', classes);
  return said.confidence === 'sure' || said.confidence === null ? title : `${title}, ${said.confidence}`;
}

/** "58 of 214 answered, about 12 minutes left by your own pace" */
export function progressWords(progress: RoundProgress, minutes: number | null): string {
  const answered = answeredCount(progress);
  const counts = `${formatNumber(answered)} of ${formatNumber(progress.candidates)} answered`;
  if (answered >= progress.candidates || minutes === null) return counts;
  return `${counts}, about ${timeWords(minutes)} left by your own pace`;
}

function timeWords(minutes: number): string {
  if (minutes < 100) return formatCount(minutes, 'minute');
  return formatCount(Math.round(minutes / 60), 'hour');
}

/** What stands in the end: "31 events, 180 no event, 3 undecided" */
export function tallyWords({ events, noEvents, undecided }: RoundProgress): string {
  return `${formatCount(events, 'event')}, ${formatNumber(noEvents)} no event, ${formatNumber(undecided)} undecided`;
}

export interface AnswerSavingFacts {
  packets: readonly AnswerPacket[];
  halt: Halt;
  /** False while something is only in the memory of this page. */
  isKept: boolean;
  answered: number;
}

/** How far the answers are stored, for the head of the bench. */
export function answerSaveWords({ packets, halt, isKept, answered }: AnswerSavingFacts): SaveWords {
  const undecided = packets.filter(isUndecided).length;
  if (undecided > 0)
    return { state: 'undecided', text: `Not stored: ${formatCount(undecided, 'answer')} to decide on` };
  const waiting = packets.reduce((sum, { answers }) => sum + answers.length, 0);
  if (waiting > 0 && halt !== 'none')
    return {
      state: 'unsent',
      text: `${keptWords(isKept)}, ${formatCount(waiting, 'answer')} waiting: ${HALT_WORDS[halt]}`,
    };
  if (waiting > 0) return { state: 'saving', text: `Saving ${formatCount(waiting, 'answer')}` };
  if (answered === 0) return { state: 'stored', text: 'No answers yet' };
  return { state: 'stored', text: `All ${formatCount(answered, 'answer')} stored` };
}

/** "Candidate 58 in this order, drawn at random. Not answered yet." */
export function placeWords(
  { rank, isDrawn }: Pick<RoundItem, 'rank' | 'isDrawn'>,
  { candidates, said }: { candidates: number; said: Said | null },
): string {
  const drawn = isDrawn ? ', drawn at random' : '';
  const again = said ? ' Answered already: another answer takes its place.' : '';
  return `Candidate ${formatNumber(rank + 1)} of ${formatNumber(candidates)} in this order${drawn}.${again}`;
}

/** Whose picture it is. People count channels from 1. */
export function channelWords({ channel, shown }: { channel: number; shown: number }): string {
  const heard = `Heard on channel ${channel + 1}`;
  return channel === shown ? `${heard}, which is shown.` : `${heard}; channel ${shown + 1} is shown.`;
}

/** Marks set by hand come first where they are not stored; else the line is that of the round. */
export function joinSaving(marks: SaveWords, round: SaveWords | undefined): SaveWords {
  return !round || marks.state !== 'stored' ? marks : round;
}

/** A browser without storage, or without room: then the page must stay open. */
function keptWords(isKept: boolean): string {
  return isKept ? 'Kept here' : 'Kept in this page only (the browser stores nothing; keep it open)';
}
