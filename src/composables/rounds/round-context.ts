import { inject, provide } from 'vue';
import type { InjectionKey } from 'vue';
import type { Bench } from '@/composables/bench/useBench.ts';
import { useRound } from '@/composables/rounds/useRound.ts';
import type { Round } from '@/composables/rounds/useRound.ts';

const roundKey: InjectionKey<Round> = Symbol('round');

/** The round of an open pass of rounds, known to every component below; none in any other pass, and never in a blind one. */
export function provideRound(bench: Bench): Round | null {
  const { pass, canMark, areCandidatesShown } = bench;
  if (!pass || pass.kind !== 'rounds' || !canMark || !areCandidatesShown) return null;
  const round = useRound(bench, pass.id);
  provide(roundKey, round);
  void round.start();
  return round;
}

export function useRoundHere(): Round {
  const round = inject(roundKey);
  if (!round) throw new Error('There is no round around this component.');
  return round;
}
