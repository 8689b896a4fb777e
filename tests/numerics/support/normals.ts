/** Independent numbers of the standard normal distribution that are the same in every run. */
export function normals(seed: number): () => number {
  const uniform = uniforms(seed);
  let spare = NaN;
  return () => {
    if (!Number.isNaN(spare)) {
      const value = spare;
      spare = NaN;
      return value;
    }
    const radius = Math.sqrt(-2 * Math.log(uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
}

/** Numbers in (0, 1): a counter stepped by the golden ratio, its bits mixed twice by multiplication. */
export function uniforms(seed: number): () => number {
  let counter = seed >>> 0;
  return () => {
    counter = (counter + 0x9e3779b9) >>> 0;
    let bits = Math.imul(counter ^ (counter >>> 16), 0x85ebca6b);
    bits = Math.imul(bits ^ (bits >>> 13), 0xc2b2ae35);
    return ((bits ^ (bits >>> 16)) >>> 0) / 2 ** 32 + 2 ** -33;
  };
}
