import { ref } from "vue";
import type { StripColumn } from "../../shared/schemas/commit.ts";
import { findCommit } from "../drawing/stripLayout.ts";

/** Collects hex digits typed onto the strip until they name one commit; a pause or Escape starts anew. */
export function useTypedSha(columns: () => readonly StripColumn[], found: (index: number) => void) {
  const text = ref("");
  let timer: ReturnType<typeof setTimeout> | undefined;

  function key(pressed: string): void {
    clearTimeout(timer);
    if (pressed === "Escape") text.value = "";
    if (pressed === "Backspace") text.value = text.value.slice(0, -1);
    if (/^[0-9a-f]$/i.test(pressed)) text.value += pressed.toLowerCase();
    timer = setTimeout(() => (text.value = ""), 3000);
    const index = findCommit(columns(), text.value);
    if (index === null) return;
    text.value = "";
    found(index);
  }
  return { text, key };
}
