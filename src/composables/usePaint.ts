import { onBeforeUnmount, onMounted, watch } from "vue";
import type { Ref, WatchSource } from "vue";
import { readPalette } from "../drawing/palette.ts";
import type { Palette } from "../drawing/palette.ts";

/**
 * Repaints a canvas once a frame at most: when one of `sources` changed, when the paper changed and when the fonts
 * arrived. Sharp at any pixel ratio; `draw` works in CSS pixels.
 */
export function usePaint(
  canvas: Ref<HTMLCanvasElement | null>,
  size: { width: Ref<number>; height: Ref<number> },
  sources: WatchSource[],
  draw: (context: CanvasRenderingContext2D, palette: Palette) => void,
) {
  let frame = 0;
  const dark = window.matchMedia("(prefers-color-scheme: dark)");
  const theme = new MutationObserver(() => request());

  function paint(): void {
    frame = 0;
    const element = canvas.value;
    const context = element?.getContext("2d");
    if (!element || !context || size.width.value === 0) return;
    const ratio = window.devicePixelRatio || 1;
    const [w, h] = [Math.round(size.width.value * ratio), Math.round(size.height.value * ratio)];
    if (element.width !== w) element.width = w;
    if (element.height !== h) element.height = h;
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    draw(context, readPalette(element));
  }
  function request(): void {
    if (frame === 0) frame = requestAnimationFrame(paint);
  }

  watch([size.width, size.height, ...sources], request, { flush: "post" });
  onMounted(() => {
    request();
    dark.addEventListener("change", request);
    theme.observe(document.documentElement, { attributes: true, attributeFilter: ["data-theme"] });
    void document.fonts?.ready.then(request);
  });
  onBeforeUnmount(() => {
    cancelAnimationFrame(frame);
    dark.removeEventListener("change", request);
    theme.disconnect();
  });
  return { request };
}
