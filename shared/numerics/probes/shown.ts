import { inPowers } from "../../domain/powerOfTen.ts";

/** A relative size in a sentence: two digits, with its power of ten where it is small or large. Not to be read back. */
export function shown(size: number): string {
  const plain = size === 0 || !Number.isFinite(size) || (Math.abs(size) >= 0.01 && Math.abs(size) < 99.5);
  return plain ? size.toPrecision(2) : inPowers(size, 2);
}
