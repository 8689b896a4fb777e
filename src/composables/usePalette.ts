import { onBeforeUnmount, onMounted, shallowRef } from "vue";
import type { Ref } from "vue";
import { readPalette } from "../drawing/palette.ts";
import type { Palette } from "../drawing/palette.ts";

/** Colours of the paper in force, read again when the viewer or the system changes it; null before the first look. */
export function usePalette(element: Ref<HTMLElement | null>) {
  const palette = shallowRef<Palette | null>(null);
  const dark = window.matchMedia("(prefers-color-scheme: dark)");
  const read = () => {
    if (element.value) palette.value = readPalette(element.value);
  };
  const theme = new MutationObserver(read);
  onMounted(() => {
    read();
    dark.addEventListener("change", read);
    theme.observe(document.documentElement, { attributes: true, attributeFilter: ["data-theme"] });
  });
  onBeforeUnmount(() => {
    dark.removeEventListener("change", read);
    theme.disconnect();
  });
  return palette;
}
