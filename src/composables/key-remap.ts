import { isSingleKey, withShift } from '@/composables/hotkey-combo.ts';
import { combosInForce } from '@/composables/useHotkeys.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';

export type Remapped = Readonly<Record<string, string>>;

/** Stands for "on no key". */
export const NO_KEY = 'none';

/** Keys that controls, the browser, or screen readers need themselves. */
const KEPT =
  /(^|\+)(Tab|Enter|NumpadEnter|Escape|ContextMenu|CapsLock|F5|F11|F12|Control|Alt|Shift|Meta)(Left|Right)?$/;
const KEPT_BY_BROWSERS = new Set(
  ['KeyW', 'KeyT', 'KeyN', 'KeyR', 'KeyL', 'KeyC', 'KeyV', 'KeyX', 'KeyP'].map((code) => `Control+${code}`),
);

/** `?` is written by Shift and this key on the most common layout. */
function claimOf(combo: string): string {
  return combo === 'sign:?' ? 'Shift+Slash' : combo;
}

/** Two actions on one combination, if there are any. */
export function firstClash(inForce: readonly Hotkey[]): readonly [Hotkey, Hotkey] | null {
  const byCombo = new Map<string, Hotkey>();
  for (const hotkey of inForce) {
    if (hotkey.combo === NO_KEY) continue;
    const other = byCombo.get(claimOf(hotkey.combo));
    if (other) return [other, hotkey];
    byCombo.set(claimOf(hotkey.combo), hotkey);
  }
  return null;
}

/** Why no action can be put on this combination, or `null`. */
export function comboFault(combo: string, hasShifted: boolean): string | null {
  if (KEPT.test(combo)) return 'This key belongs to the browser and its controls. Choose another one.';
  if (KEPT_BY_BROWSERS.has(combo))
    return 'Browsers keep this combination for themselves. Choose another one.';
  if (hasShifted && combo.includes('Shift+'))
    return 'With Shift this key says less sure. Choose one without.';
  return null;
}

export type RemapOutcome =
  | { kind: 'done'; remapped: Remapped }
  /** Another action has the key: both can change places. */
  | { kind: 'taken'; by: Hotkey; swapped: Remapped | null }
  | { kind: 'refused'; reason: string };

/** Puts an action on a combination, as far as that leaves every other action where it is. */
export function remapKey(
  hotkeys: readonly Hotkey[],
  remapped: Remapped,
  id: string,
  combo: string,
): RemapOutcome {
  const inForce = combosInForce(hotkeys, remapped);
  const present = inForce.find((hotkey) => hotkey.id === id);
  if (!present) return { kind: 'refused', reason: 'There is no such action.' };
  const hasShifted = hotkeys.some(({ withShiftOf }) => withShiftOf === id);
  const fault = comboFault(combo, hasShifted);
  if (fault) return { kind: 'refused', reason: fault };
  const claimed = [combo, ...(hasShifted ? [withShift(combo)] : [])].map(claimOf);
  const others = inForce.filter((other) => other.id !== id && other.withShiftOf !== id);
  const seconds = others.filter((other) => other.isSecond && claimed.includes(claimOf(other.combo)));
  const freed = Object.fromEntries(seconds.map((second) => [second.id, NO_KEY]));
  const moved = { ...remapped, ...freed, [id]: combo };
  const by = others.find((other) => !other.isSecond && claimed.includes(claimOf(other.combo)));
  if (!by) return { kind: 'done', remapped: moved };
  return { kind: 'taken', by, swapped: swap(hotkeys, moved, present, by) };
}

/** `null` where changing places would only bring another clash. */
function swap(hotkeys: readonly Hotkey[], moved: Remapped, present: Hotkey, by: Hotkey): Remapped | null {
  if (by.withShiftOf !== undefined || present.combo === NO_KEY) return null;
  const hasShifted = hotkeys.some(({ withShiftOf }) => withShiftOf === by.id);
  if (comboFault(present.combo, hasShifted) !== null) return null;
  const swapped = { ...moved, [by.id]: present.combo };
  return firstClash(combosInForce(hotkeys, swapped)) ? null : swapped;
}

/** One action back on its first key; `taken` where another one has been put there. */
export function resetKey(hotkeys: readonly Hotkey[], remapped: Remapped, id: string): RemapOutcome {
  const first = hotkeys.find((hotkey) => hotkey.id === id)?.combo ?? NO_KEY;
  const { [id]: _changed, ...rest } = remapped;
  const clash = firstClash(combosInForce(hotkeys, rest));
  if (!clash) return { kind: 'done', remapped: rest };
  return remapKey(hotkeys, remapped, id, first);
}

/** Whether switching single keys off silences it. */
export function isSilenced(combo: string, areSingleKeysOn: boolean): boolean {
  return !areSingleKeysOn && isSingleKey(combo);
}
