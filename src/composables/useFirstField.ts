import { onMounted, useTemplateRef } from "vue";

/** Puts the caret into the first field of a form as soon as it stands, before anyone can have begun to type elsewhere. */
export function useFirstField(form: string): void {
  const element = useTemplateRef<HTMLElement>(form);
  onMounted(() => element.value?.querySelector<HTMLElement>("input, textarea")?.focus());
}
