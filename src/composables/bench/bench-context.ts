import { inject, provide } from 'vue';
import type { InjectionKey } from 'vue';
import type { Bench } from '@/composables/bench/useBench.ts';

const benchKey: InjectionKey<Bench> = Symbol('bench');

/** Makes the bench known to every component below, so that none has to hand it on. */
export function provideBench(bench: Bench): Bench {
  provide(benchKey, bench);
  return bench;
}

export function useBenchHere(): Bench {
  const bench = inject(benchKey);
  if (!bench) throw new Error('There is no bench around this component.');
  return bench;
}
