import { computed, nextTick, ref, shallowRef, watch } from "vue";
import type { Ref } from "vue";
import {
  contentWidth,
  fittingPitch,
  MAX_PITCH,
  openingPitch,
  scrollToShow,
  stripGeometry,
} from "../drawing/stripGeometry.ts";

/** Zoom and scroll of a strip: native scrolling moves the paper, the pitch is the width of one commit. */
export function useStripView(
  scroller: Ref<HTMLElement | null>,
  width: Ref<number>,
  height: Ref<number>,
  count: Ref<number>,
) {
  const zoomed = shallowRef<number | null>(null);
  const scroll = ref(0);
  const pitch = computed(() => zoomed.value ?? openingPitch(width.value, count.value));
  const geometry = computed(() => stripGeometry(width.value, height.value, pitch.value, scroll.value));
  const content = computed(() => contentWidth(geometry.value, count.value));
  const scrolls = computed(() => content.value > width.value + 1);

  function scrollTo(left: number): void {
    if (scroller.value) scroller.value.scrollLeft = left;
    scroll.value = scroller.value?.scrollLeft ?? 0;
  }
  function show(index: number): void {
    scrollTo(scrollToShow(geometry.value, index));
  }
  /** Zooms by a factor, keeping the commit under `x` where it is. */
  async function zoom(factor: number, x: number): Promise<void> {
    const before = geometry.value;
    const smallest = Math.min(fittingPitch(width.value, count.value), pitch.value);
    const next = Math.min(MAX_PITCH, Math.max(smallest, pitch.value * factor));
    const column = (x - before.left + before.scroll) / before.pitch;
    zoomed.value = next;
    await nextTick();
    scrollTo(column * next - (x - before.left));
  }
  function onScroll(): void {
    scroll.value = scroller.value?.scrollLeft ?? 0;
  }

  watch(count, () => (zoomed.value = null));
  return { geometry, content, scrolls, show, zoom, onScroll };
}
