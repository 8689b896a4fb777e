/** One kind of mistake in a single entry. */
export interface Fault {
  readonly name: string;
  readonly apply: (entry: number, largest: number) => number;
}

/** Mistakes that are made in practice, from glaring to just above a tolerance of 1e-6. */
export const FAULTS: readonly Fault[] = [
  { name: "sign flipped", apply: (entry) => -entry },
  { name: "degrees for radians", apply: (entry) => (entry * Math.PI) / 180 },
  { name: "term dropped", apply: () => 0 },
  { name: "one per cent too large", apply: (entry) => entry * 1.01 },
  { name: "twelve tolerances too large", apply: (entry) => entry * (1 + 1.2e-5) },
  { name: "spurious term", apply: (entry, largest) => entry + largest / 8 },
];
