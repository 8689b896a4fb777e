/** A relative size in a sentence: two digits, as a power of ten where it is small. Not for numbers to be read back. */
export function shown(size: number): string {
  return size >= 0.01 || size === 0 ? size.toPrecision(2) : size.toExponential(1);
}
