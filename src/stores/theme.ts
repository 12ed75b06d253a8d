import { usePreferredDark } from '@vueuse/core';
import { defineStore } from 'pinia';
import { computed, ref, watchEffect } from 'vue';

const STORED = 'benchbell.theme';
export const THEME_CHOICES = ['system', 'light', 'dark'] as const;
export type ThemeChoice = (typeof THEME_CHOICES)[number];

/** Light or dark: as the device says, unless chosen on this browser. */
export const useThemeStore = defineStore('theme', () => {
  const systemIsDark = usePreferredDark();
  const choice = ref<ThemeChoice>(storedChoice());
  const isDark = computed(() => (choice.value === 'system' ? systemIsDark.value : choice.value === 'dark'));
  watchEffect(() => {
    document.documentElement.dataset.theme = isDark.value ? 'dark' : 'light';
  });

  function choose(next: ThemeChoice): void {
    choice.value = next;
    localStorage.setItem(STORED, next);
  }

  return { choice, isDark, choose };
});

function storedChoice(): ThemeChoice {
  const stored = localStorage.getItem(STORED);
  return THEME_CHOICES.find((choice) => choice === stored) ?? 'system';
}
