import { createGlobalState, useLocalStorage } from '@vueuse/core';

interface HotkeySettings {
  /** Single-key shortcuts can be switched off (WCAG 2.2, 2.1.4). */
  areSingleKeysOn: boolean;
  /** Combination by hotkey id, where a person chose another one. */
  remapped: Record<string, string>;
}

export const useHotkeySettings = createGlobalState(() => {
  const settings = useLocalStorage<HotkeySettings>(
    'recalesce.keys',
    { areSingleKeysOn: true, remapped: {} },
    { mergeDefaults: true },
  );

  function remap(id: string, combo: string): void {
    settings.value = { ...settings.value, remapped: { ...settings.value.remapped, [id]: combo } };
  }

  function remapTo(remapped: Readonly<Record<string, string>>): void {
    settings.value = { ...settings.value, remapped: { ...remapped } };
  }

  function reset(): void {
    settings.value = { areSingleKeysOn: true, remapped: {} };
  }

  return { settings, remap, remapTo, reset };
});
