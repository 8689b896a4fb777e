import { computed, ref } from "vue";
import type { Ref } from "vue";

/** Which of `count` rows of equal height are worth drawing: those in view and a few around them. */
export function useVirtualRows(
  frame: Ref<HTMLElement | null>,
  count: () => number,
  rowHeight: number,
  viewHeight: number,
) {
  const scroll = ref(0);
  const AROUND = 6;
  const first = computed(() => Math.max(0, Math.min(Math.floor(scroll.value / rowHeight) - AROUND, count() - 1)));
  const last = computed(() => Math.min(count() - 1, Math.ceil((scroll.value + viewHeight) / rowHeight) + AROUND));
  function onScroll(): void {
    scroll.value = frame.value?.scrollTop ?? 0;
  }
  /** Scrolls no more than needed to bring a row into view. */
  function show(index: number): void {
    const element = frame.value;
    if (!element) return;
    const [top, bottom] = [index * rowHeight, (index + 1) * rowHeight];
    if (top < element.scrollTop) element.scrollTop = top;
    else if (bottom > element.scrollTop + element.clientHeight) element.scrollTop = bottom - element.clientHeight;
    onScroll();
  }
  return { first, last, onScroll, show };
}
