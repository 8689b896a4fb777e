import { onBeforeUnmount, onMounted, ref } from "vue";
import type { Ref } from "vue";

/** Inner size of an element in CSS pixels, kept up to date. */
export function useElementSize(element: Ref<HTMLElement | null>) {
  const width = ref(0);
  const height = ref(0);
  let observer: ResizeObserver | undefined;
  onMounted(() => {
    const target = element.value;
    if (!target) return;
    const measure = () => {
      width.value = target.clientWidth;
      height.value = target.clientHeight;
    };
    measure();
    observer = new ResizeObserver(measure);
    observer.observe(target);
  });
  onBeforeUnmount(() => observer?.disconnect());
  return { width, height };
}
