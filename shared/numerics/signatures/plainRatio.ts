import { powerOfTen } from "../../domain/powerOfTen.ts";
const MOST = 10;
const MOST_OF_A_FRACTION = 4;

/** 2, 1/2, 2/3 ... 10: what is mistaken without any unit. */
const RATIOS: readonly (readonly [number, string])[] = fractions();
const LOG_TOLERANCE = 1e-3;

function fractions(): (readonly [number, string])[] {
  const found: (readonly [number, string])[] = [];
  for (let p = 1; p <= MOST; p += 1) {
    for (let q = 1; q <= MOST; q += 1) {
      const simple = p === 1 || q === 1 || Math.max(p, q) <= MOST_OF_A_FRACTION;
      if (p === q || !simple || commonDivisor(p, q) > 1) continue;
      found.push([p / q, q === 1 ? `${p}` : `${p}/${q}`]);
    }
  }
  return found;
}

function commonDivisor(p: number, q: number): number {
  return q === 0 ? p : commonDivisor(q, p % q);
}

/**
 * The small fraction or power of ten that a positive factor is within the relative `tolerance`, as it is written, or
 * null. 1 is none.
 */
export function plainRatio(factor: number, tolerance: number): string | null {
  for (const [ratio, text] of RATIOS) if (Math.abs(factor / ratio - 1) <= tolerance) return text;
  const exponent = Math.round(Math.log10(factor));
  if (exponent === 0 || !(Math.abs(Math.log10(factor) - exponent) <= LOG_TOLERANCE)) return null;
  return Math.abs(factor / 10 ** exponent - 1) <= tolerance ? powerOfTen(exponent) : null;
}
