import { computed, ref, watch } from "vue";
import { useRoute, useRouter } from "vue-router";
import type { Crosshair } from "../drawing/drawMatrix.ts";
import type { BlockPlanes } from "../drawing/planes.ts";

/** The crosshair lives in the address as `?entry=row,column`; written once it has come to rest. */
export function useBlockCrosshair(planes: () => BlockPlanes | null, worst: () => Crosshair | null) {
  const route = useRoute();
  const router = useRouter();
  const moving = ref<Crosshair | null>(null);
  let timer: ReturnType<typeof setTimeout> | undefined;

  const asked = computed<Crosshair | null>(() => {
    const match = /^(\d{1,9}),(\d{1,9})$/.exec(String(route.query.entry ?? ""));
    return match ? { row: Number(match[1]), column: Number(match[2]) } : null;
  });
  const at = computed<Crosshair>(() => {
    const wanted = moving.value ?? asked.value ?? worst() ?? { row: 0, column: 0 };
    const block = planes();
    if (!block) return wanted;
    return {
      row: Math.max(0, Math.min(block.rows - 1, wanted.row)),
      column: Math.max(0, Math.min(block.columns - 1, wanted.column)),
    };
  });
  function point(to: Crosshair): void {
    moving.value = to;
    clearTimeout(timer);
    timer = setTimeout(() => {
      void router.replace({ query: { ...route.query, entry: `${to.row},${to.column}` } });
    }, 300);
  }
  watch(asked, () => (moving.value = null));
  return { at, point };
}
