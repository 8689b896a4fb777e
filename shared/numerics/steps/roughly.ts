import { inPowers } from "../../domain/powerOfTen.ts";

/** A number > 0 as people say it: `6 × 10⁻⁶`, `10⁻⁸`, `0.02`; one significant digit. */
export function roughly(value: number): string {
  if (value === 0) return "0";
  if (!Number.isFinite(value)) return String(value);
  if (value >= 0.01 && value < 9.5) return String(Number(value.toPrecision(1)));
  return inPowers(value, 1);
}

/** A part of a whole: `all entries`, `99 % of the entries`; never rounded to all or none. */
export function shareOf(part: number, whole: number): string {
  if (part >= whole) return "every entry";
  if (part === 0) return "no entry";
  const percent = Math.min(99, Math.max(1, Math.round((100 * part) / whole)));
  return whole < 10 ? `${part} of ${whole} entries` : `${percent} % of the entries`;
}

export function entriesOf(count: number): string {
  if (count === 1) return "one entry";
  return `${String(count).replace(/\B(?=(\d{3})+$)/g, "\u202f")} entries`;
}
