import { defineStore } from "pinia";
import { ref, watch } from "vue";

export const THEME_CHOICES = ["system", "paper", "night"] as const;
export type ThemeChoice = (typeof THEME_CHOICES)[number];
const KEY = "clinograph.theme";

function stored(): ThemeChoice {
  const value = localStorage.getItem(KEY);
  return THEME_CHOICES.find((choice) => choice === value) ?? "system";
}

/** What this viewer prefers on this machine. */
export const usePreferencesStore = defineStore("preferences", () => {
  const theme = ref<ThemeChoice>(stored());
  watch(
    theme,
    (choice) => {
      localStorage.setItem(KEY, choice);
      if (choice === "system") delete document.documentElement.dataset.theme;
      else document.documentElement.dataset.theme = choice;
    },
    { immediate: true },
  );
  return { theme };
});
