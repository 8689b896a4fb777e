/** Pixels of the strip: where the paper, its ruler and its columns lie. */
export interface StripGeometry {
  readonly width: number;
  readonly height: number;
  /** Left edge of the plot (the ruler's labels stand before it) and its right edge. */
  readonly left: number;
  readonly right: number;
  readonly top: number;
  readonly foot: number;
  /** Width of one commit's column. */
  readonly pitch: number;
  readonly scroll: number;
}

export const MAX_PITCH = 28;
/** Below this columns are not told apart at once: the strip scrolls instead of squeezing further by itself. */
const COMFORTABLE_PITCH = 7;
const HOLES = 18;

export function plotEdges(width: number): { left: number; right: number } {
  return width < 600 ? { left: 42, right: width - 8 } : { left: 64, right: width - 20 };
}

/** The pitch at which a strip opens: filling the width, or comfortable and scrolled to its end. */
export function openingPitch(width: number, count: number): number {
  const { left, right } = plotEdges(width);
  return Math.min(MAX_PITCH, Math.max(COMFORTABLE_PITCH, (right - left) / Math.max(1, count)));
}
/** The pitch at which all commits are in view. */
export function fittingPitch(width: number, count: number): number {
  const { left, right } = plotEdges(width);
  return Math.min(MAX_PITCH, (right - left) / Math.max(1, count));
}

export function stripGeometry(width: number, height: number, pitch: number, scroll: number): StripGeometry {
  return { width, height, ...plotEdges(width), top: HOLES + 16, foot: height - HOLES - 9, pitch, scroll };
}

/** Width that the scrolled content needs. */
export function contentWidth(geometry: StripGeometry, count: number): number {
  return geometry.left + count * geometry.pitch + (geometry.width - geometry.right);
}

export const columnX = (g: StripGeometry, index: number) => g.left + (index + 0.5) * g.pitch - g.scroll;
export const placeY = (g: StripGeometry, place: number) => g.foot - place * (g.foot - g.top);

export function columnAt(g: StripGeometry, x: number, count: number): number {
  return Math.min(count - 1, Math.max(0, Math.floor((x - g.left + g.scroll) / g.pitch)));
}

/** First and last column in view, one more on either side. */
export function columnsInView(g: StripGeometry, count: number): { first: number; last: number } {
  return {
    first: Math.max(0, Math.floor(g.scroll / g.pitch) - 1),
    last: Math.min(count - 1, Math.ceil((g.scroll + g.right - g.left) / g.pitch) + 1),
  };
}

/** Scroll that brings a column into view, moved no more than needed. */
export function scrollToShow(g: StripGeometry, index: number): number {
  const margin = Math.min(60, (g.right - g.left) / 4);
  const x = (index + 0.5) * g.pitch;
  if (x - g.scroll < margin) return Math.max(0, x - margin);
  const span = g.right - g.left;
  return x - g.scroll > span - margin ? x - span + margin : g.scroll;
}
