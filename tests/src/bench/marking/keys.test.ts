import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { labelSchemeV1 } from '@shared/domain/label-scheme.ts';
import { benchHotkeys } from '@/composables/bench/bench-hotkeys.ts';
import { withKeys } from '@/composables/bench/class-keys.ts';
import { withRoundKeys } from '@/composables/rounds/round-keys.ts';
import type { Round } from '@/composables/rounds/useRound.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { comboFault, firstClash, NO_KEY, remapKey, resetKey } from '@/composables/key-remap.ts';
import { combosInForce } from '@/composables/useHotkeys.ts';
import { anything, idlePage } from '../idle-bench.ts';

const classes = withKeys(labelSchemeV1);
const bench = anything() as Bench;
const hotkeys = benchHotkeys(bench, classes, idlePage);

describe('the keys of the bench', () => {
  it('are each the key of one action or class alone', () => {
    expect(firstClash(hotkeys)?.map(({ id }) => id) ?? null).toBeNull();
    expect(new Set(hotkeys.map(({ id }) => id)).size).toBe(hotkeys.length);
  });

  it('stay so in a round', () => {
    const inRound = withRoundKeys(hotkeys, bench, anything() as Round);
    expect(firstClash(inRound)?.map(({ id }) => id) ?? null).toBeNull();
  });

  it('have a name and a place in the sheet, and every class has one', () => {
    expect(hotkeys.filter(({ label, group, isSecond }) => !label || (!group && !isSecond))).toEqual([]);
    const ids = new Set(hotkeys.map(({ id }) => id));
    expect(labelSchemeV1.filter(({ key }) => !ids.has(`bench.class.${key}`))).toEqual([]);
  });

  it('are none that browsers or controls keep for themselves', () => {
    const kept = hotkeys.filter(({ id, combo }) => id !== 'bench.clear' && comboFault(combo, false) !== null);
    expect(kept.map(({ id }) => id)).toEqual([]);
  });

  it('of classes lie under the left hand, by position', () => {
    const left = /^Key[QWERTASDFGZXCVB]$/;
    expect(classes.filter(({ code }) => code === null || !left.test(code))).toEqual([]);
  });
});

describe('putting an action on another key', () => {
  it('moves it, and a class with what Shift does', () => {
    const outcome = remapKey(hotkeys, {}, 'bench.class.crack', 'KeyX');
    expect(outcome.kind).toBe('done');
    const remapped = outcome.kind === 'done' ? outcome.remapped : {};
    const combos = new Map(combosInForce(hotkeys, remapped).map(({ id, combo }) => [id, combo]));
    expect(combos.get('bench.class.crack')).toBe('KeyX');
    expect(combos.get('bench.class.crack.less')).toBe('Shift+KeyX');
  });

  it('tells who has the key, and offers to change places', () => {
    const outcome = remapKey(hotkeys, {}, 'bench.merge', 'KeyN');
    expect(outcome).toMatchObject({ kind: 'taken', by: { id: 'bench.note' } });
    const swapped = outcome.kind === 'taken' ? (outcome.swapped ?? {}) : {};
    expect(swapped).toEqual({ 'bench.merge': 'KeyN', 'bench.note': 'Shift+KeyM' });
    expect(firstClash(combosInForce(hotkeys, swapped))).toBeNull();
  });

  it('does not take what Shift does to a class away from it', () => {
    const outcome = remapKey(hotkeys, {}, 'bench.merge', 'Shift+KeyF');
    expect(outcome).toMatchObject({ kind: 'taken', swapped: null });
  });

  it('takes a second key from what has another one', () => {
    const outcome = remapKey(hotkeys, {}, 'bench.merge', 'Backspace');
    expect(outcome).toEqual({
      kind: 'done',
      remapped: { 'bench.merge': 'Backspace', 'bench.delete.back': NO_KEY },
    });
  });

  it('refuses keys of the browser, and Shift for a class', () => {
    for (const combo of ['Tab', 'Escape', 'Control+KeyW', 'F5'])
      expect(remapKey(hotkeys, {}, 'bench.merge', combo).kind).toBe('refused');
    expect(remapKey(hotkeys, {}, 'bench.class.crack', 'Shift+KeyX').kind).toBe('refused');
    expect(remapKey(hotkeys, {}, 'bench.nothing', 'KeyX').kind).toBe('refused');
  });

  it('goes back to the first key, or tells who has it now', () => {
    const moved = { 'bench.merge': 'KeyX' };
    expect(resetKey(hotkeys, moved, 'bench.merge')).toEqual({ kind: 'done', remapped: {} });
    const taken = { 'bench.merge': 'KeyX', 'bench.note': 'Shift+KeyM' };
    expect(resetKey(hotkeys, taken, 'bench.merge')).toMatchObject({
      kind: 'taken',
      by: { id: 'bench.note' },
    });
  });

  it('never leaves two actions on one key, whatever is put where', () => {
    const ids = hotkeys.filter(({ withShiftOf, isSecond }) => !withShiftOf && !isSecond).map(({ id }) => id);
    const codes = [
      'KeyX',
      'KeyF',
      'KeyM',
      'Slash',
      'Digit1',
      'Shift+KeyY',
      'Control+KeyA',
      'Backspace',
      'KeyZ',
    ];
    const move = fc.tuple(fc.constantFrom(...ids), fc.constantFrom(...codes), fc.boolean());
    fc.assert(
      fc.property(fc.array(move, { maxLength: 12 }), (moves) => {
        let remapped: Readonly<Record<string, string>> = {};
        for (const [id, combo, isReset] of moves) {
          const outcome = isReset ? resetKey(hotkeys, remapped, id) : remapKey(hotkeys, remapped, id, combo);
          if (outcome.kind === 'done') remapped = outcome.remapped;
          if (outcome.kind === 'taken' && outcome.swapped) remapped = outcome.swapped;
          expect(firstClash(combosInForce(hotkeys, remapped))).toBeNull();
        }
      }),
    );
  });
});
