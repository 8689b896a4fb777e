import type { WireNumber } from "../../shared/schemas/common.ts";

/** A number as people read it: a coefficient and, outside the plain range, a power of ten. */
export interface NumberParts {
  readonly coefficient: string;
  /** Exponent of ten as text with a real minus, or null where none is written. */
  readonly exponent: string | null;
  /** The shortest decimal that reads back as the same binary64. */
  readonly full: string;
}

const MINUS = "\u2212";
const realMinus = (text: string) => text.replace("-", MINUS);

function words(value: number): string {
  if (Number.isNaN(value)) return "not a number";
  return value > 0 ? "infinite" : `${MINUS}infinite`;
}

/**
 * `digits` significant digits; values of magnitude 0.01 to 99,999 are written plainly when `plain` is set,
 * everything else as coefficient times a power of ten. Rounding up to ten carries into the exponent.
 */
export function numberParts(wire: WireNumber, digits = 2, plain = false): NumberParts {
  const value = Number(wire);
  if (!Number.isFinite(value)) return { coefficient: words(value), exponent: null, full: String(wire) };
  const full = Object.is(value, -0) ? "-0" : String(value);
  if (value === 0) return { coefficient: "0", exponent: null, full };
  const magnitude = Math.abs(value);
  if (plain && magnitude >= 0.01 && magnitude < 99_999.5) {
    const decimals = Math.max(0, digits - 1 - Math.floor(Math.log10(magnitude)));
    return { coefficient: realMinus(value.toFixed(Math.min(decimals, 20))), exponent: null, full };
  }
  const [coefficient = "", power = "0"] = value.toExponential(digits - 1).split("e");
  return { coefficient: realMinus(coefficient), exponent: realMinus(power.replace("+", "")), full };
}

const SUPERSCRIPTS: Record<string, string> = {
  "0": "⁰",
  "1": "¹",
  "2": "²",
  "3": "³",
  "4": "⁴",
  "5": "⁵",
  "6": "⁶",
  "7": "⁷",
  "8": "⁸",
  "9": "⁹",
  [MINUS]: "⁻",
};

/** The same in plain text, with superscript characters: for titles, Markdown and labels; it does not break. */
export function numberText(wire: WireNumber, digits = 2, plain = false): string {
  const { coefficient, exponent } = numberParts(wire, digits, plain);
  if (exponent === null) return coefficient;
  return `${coefficient}\u00a0×\u00a010${[...exponent].map((c) => SUPERSCRIPTS[c] ?? c).join("")}`;
}

/** A count with thin groups of three. */
export function countText(value: number): string {
  return Math.trunc(value)
    .toString()
    .replace(/\B(?=(\d{3})+$)/g, "\u202f");
}

const SMALL = ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve"];
/** Small counts in words, as sentences want them: `three partials`. */
export function countWords(value: number, one: string, many = `${one}s`): string {
  return `${SMALL[value] ?? countText(value)} ${value === 1 ? one : many}`;
}
export const countOf = (value: number, one: string, many = `${one}s`) =>
  `${countText(value)} ${value === 1 ? one : many}`;

/** A share 0..1 as per cent, never rounded up to 100 or down to 0 while something is left. */
export function percentText(share: number): string {
  if (share > 0.999 && share < 1) return "99.9 %";
  if (share > 0 && share < 0.001) return "0.1 %";
  const text = (share * 100).toFixed(1).replace(/\.0$/, "");
  return `${text} %`;
}

export const capitalised = (text: string) => text.charAt(0).toUpperCase() + text.slice(1);

/** A sentence whose powers of ten do not break across lines. */
export const unbroken = (sentence: string) => sentence.replaceAll(" × 10", "\u00a0×\u00a010");
