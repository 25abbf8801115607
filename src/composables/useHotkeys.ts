import { useEventListener } from '@vueuse/core';
import { computed, toValue } from 'vue';
import type { ComputedRef, MaybeRefOrGetter } from 'vue';
import { isSingleKey, positionCombo, signCombo, withShift } from '@/composables/hotkey-combo.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

export interface Hotkey {
  /** Stable name under which a changed combination is remembered: `bench.play`. */
  id: string;
  /** `Shift+KeyF` by position on the keyboard, `sign:?` by the sign that is written. */
  combo: string;
  /** What it does, for the sheet of keys. */
  label: string;
  group?: string;
  /** Id of the hotkey whose combination this one adds Shift to, wherever that is put. */
  withShiftOf?: string;
  /** A second combination for the same: works, but is not listed. */
  isSecond?: boolean;
  /** Whether the sheet lists it; always unless told. */
  isListed?: () => boolean;
  /** Held keys repeat only where that is meant, as for moving along the axis. */
  repeats?: boolean;
  run: (event: KeyboardEvent) => void;
}

/** Each with the combination that a person put it on, or its first one. */
export function combosInForce(
  hotkeys: readonly Hotkey[],
  remapped: Readonly<Record<string, string>>,
): Hotkey[] {
  return hotkeys.map((hotkey) => {
    const base = remapped[hotkey.withShiftOf ?? ''];
    return { ...hotkey, combo: base ? withShift(base) : (remapped[hotkey.id] ?? hotkey.combo) };
  });
}

const OWN_KEYS = 'input, textarea, select, [contenteditable="true"], [role="textbox"]';
const PRESSES_ITSELF = 'button, a[href], summary, [role="button"]';

function isTyping(target: EventTarget | null): boolean {
  return target instanceof Element && target.closest(OWN_KEYS) !== null;
}

/** Space and Enter belong to the button that has the focus. */
function isPressing(event: KeyboardEvent): boolean {
  if (event.code !== 'Space' && event.code !== 'Enter') return false;
  return event.target instanceof Element && event.target.closest(PRESSES_ITSELF) !== null;
}

function isBehindDialog(target: EventTarget | null): boolean {
  const dialog = document.querySelector('dialog[open]');
  return dialog !== null && !(target instanceof Node && dialog.contains(target));
}

function isOurs(event: KeyboardEvent): boolean {
  if (event.isComposing || event.defaultPrevented) return false;
  return !isTyping(event.target) && !isPressing(event) && !isBehindDialog(event.target);
}

/**
 * Runs the action of a pressed combination while the calling component lives and `isActive` is true. Typing in a
 * field never triggers one. Returns the hotkeys with the combinations in force, for the sheet of keys.
 */
export function useHotkeys(
  hotkeys: MaybeRefOrGetter<readonly Hotkey[]>,
  isActive: MaybeRefOrGetter<boolean> = true,
): { inForce: ComputedRef<Hotkey[]> } {
  const { settings } = useHotkeySettings();
  const inForce = computed(() => combosInForce(toValue(hotkeys), settings.value.remapped));

  function isOn(hotkey: Hotkey): boolean {
    return settings.value.areSingleKeysOn || !isSingleKey(hotkey.combo);
  }

  useEventListener(window, 'keydown', (event: KeyboardEvent) => {
    if (!toValue(isActive) || !isOurs(event)) return;
    const pressed = [positionCombo(event), signCombo(event)];
    const hotkey = inForce.value.find((one) => pressed.includes(one.combo));
    if (!hotkey || !isOn(hotkey) || (event.repeat && !hotkey.repeats)) return;
    event.preventDefault();
    hotkey.run(event);
  });

  return { inForce };
}
