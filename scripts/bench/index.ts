/**
 * Measures what the product claims and prints it as ratios of one run, because machines are noisy.
 * `npm run bench` runs all, `npm run bench -- judge gate` some.
 */
const BENCHES = ["judge", "faults", "drift", "trace", "ingest", "growth", "history", "gate"] as const;

const asked = process.argv.slice(2);
const unknown = asked.filter((name) => !(BENCHES as readonly string[]).includes(name));
if (unknown.length > 0) {
  console.error(`There is no bench ${unknown.join(", ")}; there are ${BENCHES.join(", ")}.`);
  process.exit(2);
}
for (const name of BENCHES) {
  if (asked.length > 0 && !asked.includes(name)) continue;
  const bench = (await import(`./${name}.ts`)) as { run(): Promise<void> };
  await bench.run();
  console.log("");
}

export {};
