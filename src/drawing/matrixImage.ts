import { MOTION_CODE, MOTIONS, VERDICT_CODE, VERDICTS } from "../../shared/domain/vocabulary.ts";
import { cividis } from "./cividis.ts";
import { rulerPlace } from "./decades.ts";
import type { Palette } from "./palette.ts";
import type { BlockPlanes } from "./planes.ts";

export const LAYERS = ["error", "verdict", "motion", "derivative", "reference"] as const;
export type Layer = (typeof LAYERS)[number];
type Colour = readonly [number, number, number];

/** `#rrggbb` as numbers. */
export function rgbOf(hex: string): Colour {
  const value = Number.parseInt(hex.slice(1), 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
}

/** Structurally empty: nothing claimed and nothing seen. Drawn as paper with hatching, not as a colour. */
export function isEmpty(planes: BlockPlanes, k: number): boolean {
  const reference = planes.reference[k]!;
  return (
    planes.derivative[k] === 0 &&
    (reference === 0 || Number.isNaN(reference)) &&
    planes.verdict[k] !== VERDICT_CODE.disagrees
  );
}

/** Decades that the values of a layer span, head and at most sixteen below it. */
export function magnitudeSpan(values: Float64Array): { low: number; high: number } {
  let high = Number.NEGATIVE_INFINITY;
  let low = Number.POSITIVE_INFINITY;
  for (const value of values) {
    const magnitude = Math.abs(value);
    if (!(magnitude > 0) || magnitude === Infinity) continue;
    const log = Math.log10(magnitude);
    if (log > high) high = log;
    if (log < low) low = log;
  }
  if (high === Number.NEGATIVE_INFINITY) return { low: -1, high: 0 };
  const head = Math.ceil(high);
  return { low: Math.max(Math.floor(low), head - 16), high: Math.max(head, Math.floor(low) + 1) };
}

const MOTION_COLOUR: Record<(typeof MOTIONS)[number], (p: Palette) => string> = {
  still: (p) => p.gridCoarse,
  together: (p) => p.trace,
  "derivative-only": (p) => p.verdicts.disagrees,
  "model-only": (p) => p.verdicts.unresolved,
  apart: (p) => p.verdicts.invalid,
};

/** Colour of entry k in a layer, or null for an entry that the layer leaves empty. */
export function entryColour(planes: BlockPlanes, layer: Layer, palette: Palette): (k: number) => Colour | null {
  const invalid = rgbOf(palette.verdicts.invalid);
  if (layer === "verdict") {
    const colours = VERDICTS.map((verdict) =>
      rgbOf(verdict === "agrees" ? palette.gridCoarse : palette.verdicts[verdict]),
    );
    return (k) => colours[planes.verdict[k]!] ?? null;
  }
  if (layer === "motion") {
    const colours = MOTIONS.map((motion) => rgbOf(MOTION_COLOUR[motion](palette)));
    return (k) => colours[planes.motion?.[k] ?? MOTION_CODE.still] ?? null;
  }
  if (layer === "error") {
    return (k) => {
      if (planes.verdict[k] === VERDICT_CODE.invalid) return invalid;
      const error = planes.error[k]!;
      return Number.isNaN(error) || isEmpty(planes, k) ? null : cividis(rulerPlace(error));
    };
  }
  const values = planes[layer];
  const { low, high } = magnitudeSpan(values);
  return (k) => {
    const value = values[k]!;
    if (!Number.isFinite(value)) return layer === "derivative" ? invalid : null;
    return value === 0 ? null : cividis((Math.log10(Math.abs(value)) - low) / (high - low));
  };
}

/**
 * One pixel an entry, red, green, blue, alpha; empty entries are transparent. A matrix larger than `most` on a side is
 * thinned to it, and a pixel then shows its worst entry (largest error; the largest magnitude of values).
 */
export function matrixPixels(
  planes: BlockPlanes,
  layer: Layer,
  palette: Palette,
  most = 2048,
): { width: number; height: number; data: Uint8ClampedArray<ArrayBuffer> } {
  const stepX = Math.max(1, Math.ceil(planes.columns / most));
  const stepY = Math.max(1, Math.ceil(planes.rows / most));
  const width = Math.ceil(planes.columns / stepX);
  const height = Math.ceil(planes.rows / stepY);
  const colour = entryColour(planes, layer, palette);
  const weight = layer === "derivative" || layer === "reference" ? planes[layer] : planes.error;
  const data = new Uint8ClampedArray(4 * width * height);
  for (let y = 0; y < height; y += 1) {
    for (let x = 0; x < width; x += 1) {
      let k = y * stepY * planes.columns + x * stepX;
      for (let i = y * stepY; i < Math.min(planes.rows, (y + 1) * stepY); i += 1) {
        for (let j = x * stepX; j < Math.min(planes.columns, (x + 1) * stepX); j += 1) {
          const other = i * planes.columns + j;
          if (!(Math.abs(weight[k]!) >= Math.abs(weight[other]!))) k = other;
        }
      }
      const [r, g, b] = colour(k) ?? [0, 0, 0];
      data.set([r, g, b, colour(k) === null ? 0 : 255], 4 * (y * width + x));
    }
  }
  return { width, height, data };
}
