import { describe, expect, it } from 'vitest';
import { ref } from 'vue';
import { hasPhaseUse } from '@/composables/bench/keys/phase-keys.ts';

function benchWith(phases: number, canAdd: boolean, films = 0) {
  const beside = {
    phases: { items: ref(Array.from({ length: phases })), canAdd: ref(canAdd) },
    videos: { items: ref(Array.from({ length: films })) },
  };
  return { beside } as unknown as Parameters<typeof hasPhaseUse>[1];
}
const KEYS = [
  'bench.phase.start',
  'bench.phase.end',
  'bench.phase.next',
  'bench.phase.previous',
  'bench.film',
];
const used = (bench: ReturnType<typeof benchWith>) => KEYS.filter((id) => hasPhaseUse(id, bench));

describe('the keys of growth phases and film', () => {
  it('have no use where phases are withheld and there is no film', () => {
    expect(used(benchWith(0, false))).toEqual([]);
  });

  it('only go from phase to phase where none may be added', () => {
    expect(used(benchWith(3, false))).toEqual(['bench.phase.next', 'bench.phase.previous']);
  });

  it('all have one where phases may be added and there is a film', () => {
    expect(used(benchWith(2, true, 1))).toEqual(KEYS);
  });
});
