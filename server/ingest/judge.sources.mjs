// Starts the judge worker from its TypeScript sources (development, tests, demo): worker threads do not take the
// loader of the main thread over. The built server runs judge.js instead.
import { register } from "tsx/esm/api";

register();
export const { posting, motions, coverages, drifts, steps } = await import("./judge.worker.ts");
