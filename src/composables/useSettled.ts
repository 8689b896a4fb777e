import { onScopeDispose, shallowRef, watch } from "vue";
import type { ShallowRef } from "vue";

/** A value once it has rested for so many milliseconds: what is asked for with it is not asked for at every step. */
export function useSettled<T>(source: () => T, milliseconds = 250): Readonly<ShallowRef<T>> {
  const settled = shallowRef(source());
  let timer: ReturnType<typeof setTimeout> | undefined;
  watch(source, (value) => {
    clearTimeout(timer);
    timer = setTimeout(() => (settled.value = value), milliseconds);
  });
  onScopeDispose(() => clearTimeout(timer));
  return settled;
}
