import type { HistoryItem } from "../../shared/schemas/block.ts";
import { rulerPlace } from "./decades.ts";

/**
 * Smallest relative error that the reference of this entry can see: U / max(|r|, floor). The floor is not told with a
 * history, but e = |a - r| / max(|r|, floor) is, so that the ratio |a - r| / e gives the divisor back where e > 0.
 */
export function resolutionOf(
  item: Pick<HistoryItem, "derivative" | "reference" | "uncertainty" | "error">,
): number | null {
  if (item.reference === null || item.uncertainty === null) return null;
  const distance = Math.abs(Number(item.derivative) - Number(item.reference));
  const error = Number(item.error ?? Number.NaN);
  const told = error > 0 && Number.isFinite(error) && distance > 0;
  const divisor = told ? distance / error : Math.abs(Number(item.reference));
  const uncertainty = Number(item.uncertainty);
  if (uncertainty === 0) return 0;
  return divisor > 0 ? uncertainty / divisor : null;
}

export interface TracePoint {
  readonly item: HistoryItem;
  /** 0..1 along the commits. */
  readonly along: number;
  /** Place of the error on the ruler; null where nothing could be told. */
  readonly place: number | null;
  /** Place up to which the reference is blind. */
  readonly blind: number;
}

/** Where each commit of an entry's history stands; at most `most`, the newest. */
export function traceEntry(history: readonly HistoryItem[], most = 400): TracePoint[] {
  const items = history.slice(-most);
  return items.map((item, k) => {
    const resolution = resolutionOf(item);
    const invalid = item.verdict === "invalid";
    return {
      item,
      along: items.length === 1 ? 0.5 : k / (items.length - 1),
      place: item.error === null ? (invalid ? 1 : null) : rulerPlace(Number(item.error)),
      blind: resolution === null ? 0 : rulerPlace(resolution),
    };
  });
}

export interface ValueScale {
  readonly low: number;
  readonly high: number;
  /** 0 (low) to 1 (high), held at the ends. */
  place(value: number): number;
}

/** A linear scale over the finite values with a little air; a constant gets air of its own size. */
export function valueScale(values: readonly number[]): ValueScale {
  const finite = values.filter(Number.isFinite);
  const low = Math.min(...finite);
  const high = Math.max(...finite);
  if (finite.length === 0) return { low: 0, high: 1, place: () => 0.5 };
  const air = high > low ? (high - low) * 0.08 : Math.abs(high) || 1;
  const [from, to] = [low - air, high + air];
  return { low, high, place: (v) => Math.min(1, Math.max(0, (v - from) / (to - from))) };
}
