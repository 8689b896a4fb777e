import { defineStore } from "pinia";
import { ref } from "vue";

export interface Notice {
  readonly id: number;
  readonly text: string;
  readonly tone: "plain" | "trouble";
}

/** Short messages about what was just done; a plain one leaves by itself, trouble stays until closed. */
export const useNoticesStore = defineStore("notices", () => {
  const items = ref<Notice[]>([]);
  let last = 0;

  function close(id: number): void {
    items.value = items.value.filter((notice) => notice.id !== id);
  }
  function tell(text: string, tone: Notice["tone"] = "plain"): void {
    const id = ++last;
    items.value = [...items.value.slice(-3), { id, text, tone }];
    if (tone === "plain") setTimeout(() => close(id), 6000);
  }
  return { items, tell, close };
});
