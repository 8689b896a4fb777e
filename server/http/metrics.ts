import { collectDefaultMetrics, Histogram, Registry } from "prom-client";

export interface Metrics {
  readonly registry: Registry;
  /** Seconds from the first byte of a request to the end of its answer. */
  observeRequest(labels: { method: string; route: string; status: number }, seconds: number): void;
}

/** A registry of its own for each server, so that several can live in one process. */
export function createMetrics(): Metrics {
  const registry = new Registry();
  collectDefaultMetrics({ register: registry });
  const duration = new Histogram({
    name: "clinograph_http_request_duration_seconds",
    help: "Time to answer, by route pattern and status.",
    labelNames: ["method", "route", "status"],
    buckets: [0.005, 0.02, 0.1, 0.5, 2, 10, 60],
    registers: [registry],
  });
  return {
    registry,
    observeRequest: ({ method, route, status }, seconds) =>
      duration.observe({ method, route, status: String(status) }, seconds),
  };
}
