import { computed, onScopeDispose, shallowRef } from 'vue';
import { v7 as newId } from 'uuid';
import type { ListeningAids, MarkView } from '@shared/contract/mark-circumstances.ts';
import type { Answered, RoundAnswer, RoundItem, RoundProgress } from '@shared/contract/rounds.ts';
import type { Ref } from 'vue';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import { isUndecided } from '@/composables/rounds/answer-packet.ts';
import type { AnswerPlace } from '@/composables/rounds/answer-packet.ts';
import { afterChange, isSameSaying, saidOf } from '@/composables/rounds/round-steps.ts';
import type { RoundStep, Said } from '@/composables/rounds/round-steps.ts';
import { useAnswerOutboxStore } from '@/composables/rounds/useAnswerOutboxStore.ts';

export interface RoundAnswersOptions {
  place: AnswerPlace;
  progress: Ref<RoundProgress>;
  marks: Pick<BenchMarks, 'marks' | 'takeIn' | 'takeOut'>;
}

/** How it came to an answer; the same for all answers of one press. */
export interface AnswerFacts {
  aids: ListeningAids | null;
  view: MarkView | null;
  groupKey: string | null;
  /** Whether each was looked at itself. */
  isLookedAt: boolean;
  tookMs: number | null;
}

const WAITING = { state: 'waiting', sentence: '', theirs: null } as const;
const UNTOLD: AnswerFacts = { aids: null, view: null, groupKey: null, isLookedAt: false, tookMs: null };

/** What was said about the candidates, with undo; stored as it is said. */
export function useRoundAnswers({ place, progress, marks }: RoundAnswersOptions) {
  const said = shallowRef<ReadonlyMap<string, Said>>(new Map());
  const done = shallowRef<readonly RoundStep[]>([]);
  const undone = shallowRef<readonly RoundStep[]>([]);
  const outbox = useAnswerOutboxStore();
  const packets = computed(() => outbox.packets.filter((packet) => packet.place.passId === place.passId));
  /** What waits here, by candidate, the newest. */
  const pending = computed(
    () =>
      new Map(packets.value.flatMap(({ answers }) => answers.map((answer) => [answer.candidateId, answer]))),
  );
  /** Whose waiting answer is in the counts, since the server last told them. */
  const counted = new Set<string>();
  onScopeDispose(
    outbox.onStored((answered, passId) => {
      if (passId === place.passId) takeStored(answered);
    }),
  );

  /** What the server has counts where nothing newer waits here. */
  function adopt(items: readonly RoundItem[]): void {
    const next = new Map(said.value);
    const waiting = items.filter(({ candidate }) => pending.value.has(candidate.id));
    const fresh = waiting.filter(({ candidate }) => !counted.has(candidate.id));
    for (const item of items) {
      const { id } = item.candidate;
      if (waiting.includes(item) && !fresh.includes(item)) continue;
      outbox.adopt(id, item.answer);
      const present = saidOf(item);
      if (present) next.set(id, present);
      else next.delete(id);
    }
    said.value = next;
    for (const { candidate } of fresh) counted.add(candidate.id);
    say(fresh.map(({ candidate }) => ({ candidateId: candidate.id, after: waitingSaid(candidate.id) })));
  }

  function waitingSaid(candidateId: string): Said | null {
    const answer = pending.value.get(candidateId);
    if (!answer?.verdict) return null;
    const { verdict, mark } = answer;
    return { verdict, classKey: mark?.classKey ?? null, confidence: mark?.confidence ?? null };
  }

  /** Sends what an earlier page had left, as far as that can be done now. */
  async function takeUp(): Promise<void> {
    await outbox.settle(place.passId);
    counted.clear();
  }

  function takeStored(answered: readonly Answered[]): void {
    for (const { candidateId, answer, event } of answered) {
      if (pending.value.has(candidateId)) continue;
      say([{ candidateId, after: saidOf({ answer }) }]);
      const old = marks.marks.value.filter((mark) => mark.isOwn && mark.candidateId === candidateId);
      for (const mark of old) if (mark.key !== event?.id) marks.takeOut(mark.key);
      if (event) marks.takeIn(event);
    }
  }

  function say(changes: readonly { candidateId: string; after: Said | null }[]): void {
    const next = new Map(said.value);
    let counts = progress.value;
    for (const { candidateId, after } of changes) {
      const before = next.get(candidateId) ?? null;
      if (isSameSaying(before, after)) continue;
      counts = afterChange(counts, before, after);
      if (after) next.set(candidateId, after);
      else next.delete(candidateId);
    }
    said.value = next;
    progress.value = counts;
  }

  function toAnswer(candidateId: string, after: Said | null, facts: AnswerFacts): RoundAnswer {
    const { aids, view, groupKey, isLookedAt, tookMs } = facts;
    const mark =
      after?.verdict === 'event' && after.classKey !== null
        ? { id: newId(), classKey: after.classKey, confidence: after.confidence ?? 'sure', aids, view }
        : null;
    const told = { groupKey, isSpotCheck: isLookedAt && groupKey !== null, tookMs };
    return { id: newId(), candidateId, revision: null, verdict: after?.verdict ?? null, mark, ...told };
  }

  function put(step: RoundStep, side: 'before' | 'after', facts: AnswerFacts): void {
    say(step.changes.map((change) => ({ candidateId: change.candidateId, after: change[side] })));
    const answers = step.changes.map((change) => toAnswer(change.candidateId, change[side], facts));
    for (const { candidateId } of answers) counted.add(candidateId);
    void outbox.add({ id: newId(), place, name: step.name, answers, ...WAITING });
  }

  /** Answers, and remembers how to take it back. */
  function give(step: RoundStep, facts: AnswerFacts): void {
    const changes = step.changes.filter(({ before, after }) => !isSameSaying(before, after));
    if (changes.length === 0) return;
    done.value = [...done.value, { ...step, changes }];
    undone.value = [];
    put({ ...step, changes }, 'after', facts);
  }

  function undo(): RoundStep | null {
    const step = done.value.at(-1);
    if (!step) return null;
    done.value = done.value.slice(0, -1);
    undone.value = [...undone.value, step];
    put(step, 'before', UNTOLD);
    return step;
  }

  function redo(): RoundStep | null {
    const step = undone.value.at(-1);
    if (!step) return null;
    undone.value = undone.value.slice(0, -1);
    done.value = [...done.value, step];
    put(step, 'after', UNTOLD);
    return step;
  }

  return {
    said,
    adopt,
    give,
    undo,
    redo,
    lastStep: computed(() => done.value.at(-1) ?? null),
    nextStep: computed(() => undone.value.at(-1) ?? null),
    packets,
    halt: computed(() => outbox.halt),
    isKept: computed(() => outbox.isDurable),
    takeUp,
    undecided: computed(() => packets.value.filter(isUndecided)),
    decide: (id: string, choice: 'mine' | 'theirs') => void outbox.decide(id, choice),
    retry: () => outbox.retry(),
  };
}

export type RoundAnswers = ReturnType<typeof useRoundAnswers>;
