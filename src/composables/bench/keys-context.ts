import { computed, inject, provide } from 'vue';
import type { ComputedRef, InjectionKey, Ref } from 'vue';
import { ariaCombo, isSingleKey, readableCombo } from '@/composables/hotkey-combo.ts';
import type { Hotkey } from '@/composables/useHotkeys.ts';
import { useHotkeySettings } from '@/composables/useHotkeySettings.ts';

const keysKey: InjectionKey<Ref<readonly Hotkey[]>> = Symbol('keys in force');

/** Makes the keys in force known to the buttons that do the same. */
export function provideKeys(hotkeys: Ref<readonly Hotkey[]>): void {
  provide(keysKey, hotkeys);
}

export interface ShownKey {
  /** As it stands on the key; empty where no key does it at the moment. */
  text: string;
  aria: string | undefined;
}

export function shownKey(hotkey: Hotkey | undefined, areSingleKeysOn: boolean): ShownKey {
  if (!hotkey || (!areSingleKeysOn && isSingleKey(hotkey.combo))) return { text: '', aria: undefined };
  return { text: readableCombo(hotkey.combo), aria: ariaCombo(hotkey.combo) };
}

/** The key that does the same as a button. */
export function useKeyOf(id: () => string): ComputedRef<ShownKey> {
  const hotkeys = inject(keysKey, null);
  const { settings } = useHotkeySettings();
  return computed(() =>
    shownKey(
      hotkeys?.value.find((hotkey) => hotkey.id === id()),
      settings.value.areSingleKeysOn,
    ),
  );
}
