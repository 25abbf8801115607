import { describe, expect, it } from 'vitest';
import { labelSchemeV1 } from '@shared/domain/label-scheme.ts';
import { benchHotkeys } from '@/composables/bench/bench-hotkeys.ts';
import { withKeys } from '@/composables/bench/class-keys.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { comboFault, firstClash } from '@/composables/key-remap.ts';
import { ROUND_KEYS, withRoundKeys } from '@/composables/rounds/round-keys.ts';
import type { Round } from '@/composables/rounds/useRound.ts';
import { anything, idlePage } from '../bench/idle-bench.ts';

const bench = anything() as Bench;
const ofBench = benchHotkeys(bench, withKeys(labelSchemeV1), idlePage);
const hotkeys = withRoundKeys(ofBench, bench, anything() as Round);

describe('the keys of a round', () => {
  it('are each the key of one action or class alone, and none that browsers keep for themselves', () => {
    expect(firstClash(hotkeys)?.map(({ id }) => id) ?? null).toBeNull();
    const own = hotkeys.filter(({ id }) => id.startsWith('bench.round.'));
    expect(own.filter(({ combo }) => comboFault(combo, false) !== null)).toEqual([]);
  });

  it('leave every class where it is, and playing too', () => {
    const comboOf = (keys: typeof hotkeys, id: string) => keys.find((hotkey) => hotkey.id === id)?.combo;
    for (const { key } of labelSchemeV1)
      expect(comboOf(hotkeys, `bench.class.${key}`)).toBe(comboOf(ofBench, `bench.class.${key}`));
    expect(comboOf(hotkeys, 'bench.play')).toBe('Space');
  });

  it('answer by one key each, held keys once', () => {
    const answers = hotkeys.filter(({ combo }) =>
      [ROUND_KEYS.none, ROUND_KEYS.same, ROUND_KEYS.undecided].includes(combo as 'KeyJ'),
    );
    expect(answers.map(({ repeats }) => repeats)).toEqual([false, false, false]);
  });
});
