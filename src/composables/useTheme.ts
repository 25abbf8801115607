import { createGlobalState, useLocalStorage, usePreferredDark } from '@vueuse/core';
import { computed, watchEffect } from 'vue';
import type { ThemeName } from '@/theme/palette.ts';

export type ThemeChoice = ThemeName | 'system';

/** Light, dark or as the system has it; remembered in this browser. */
export const useTheme = createGlobalState(() => {
  const choice = useLocalStorage<ThemeChoice>('recalesce.theme', 'system');
  const prefersDark = usePreferredDark();
  const theme = computed<ThemeName>(() => {
    if (choice.value === 'light' || choice.value === 'dark') return choice.value;
    return prefersDark.value ? 'dark' : 'light';
  });
  watchEffect(() => {
    document.documentElement.dataset.theme = theme.value;
  });
  return { choice, theme };
});
