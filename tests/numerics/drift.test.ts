/** What drift tells, case by case, by its definition for one entry. */
import { describe, expect, it } from "vitest";
import { VERDICT_CODE } from "../../shared/domain/vocabulary.ts";
import { driftSeries } from "../../shared/numerics/drift/driftSeries.ts";
import type { DriftItem, DriftPoint } from "../../shared/numerics/drift/types.ts";
import { medianAbsoluteDeviation } from "../../shared/numerics/robust/medianAbsoluteDeviation.ts";
import { itemOf } from "./support/driftTrials.ts";

const NEVER = new Set<number>();
const series = (items: readonly (DriftItem | null)[], restarts: ReadonlySet<number> = NEVER): (DriftPoint | null)[] =>
  driftSeries(items, restarts);
const eventsOf = (points: readonly (DriftPoint | null)[]): string[] =>
  points.flatMap((point, k) => (point === null || point.event === null ? [] : [`${point.event} ${k}`]));
const level = (g: number, builds: number): DriftItem[] => Array.from({ length: builds }, () => itemOf(g));
const rise = (builds: number, from = -9, step = 0.1): DriftItem[] =>
  Array.from({ length: builds }, (_, k) => itemOf(from + step * (k + 1)));

describe("a baseline", () => {
  it("says nothing before five builds, and its centre and spread from then on", () => {
    const points = series(level(-9, 7));
    expect(points.slice(0, 5).map((point) => point?.decades)).toEqual([null, null, null, null, null]);
    expect(points[5]).toEqual({
      decades: 0,
      cusum: 0,
      centre: -9,
      spread: Math.fround(0.15 * Math.sqrt(1 + Math.PI / 10)),
      event: null,
    });
  });

  it("is the median of the first twenty builds and stays so", () => {
    const points = series([...level(-9, 10), ...level(-9.2, 10), ...level(-9.1, 30)]);
    expect(points.at(-1)?.centre).toBeCloseTo(-9.1, 2);
    const spreads = new Set(points.slice(20).map((point) => point?.spread));
    expect(spreads.size).toBe(1);
    // MAD 0.1 about -9.1
    expect([...spreads][0]).toBeCloseTo(0.15 * Math.sqrt(1 + Math.PI / 40), 3);
  });

  it("widens with the noise it has seen", () => {
    const noise = Array.from({ length: 20 }, (_, k) => -9 + 0.25 * Math.sin(k * k));
    const point = series([...noise.map((g) => itemOf(g)), itemOf(-9)]).at(-1);
    const expected = 1.4826 * medianAbsoluteDeviation(noise) * Math.sqrt(1 + Math.PI / 40);
    expect(expected).toBeGreaterThan(0.18);
    expect(Math.abs((point?.spread ?? NaN) - expected)).toBeLessThan(0.002);
  });

  it("does not learn a climb that begins while it is young", () => {
    const points = series([...level(-9, 6), ...rise(40)]);
    expect(points.at(-1)?.centre).toBeLessThan(-8.8);
    expect(eventsOf(points)).toEqual(["climb 16"]);
  });
});

describe("a climb", () => {
  it("of 0.1 decade a build is told when its mean over two builds is a decade, once, and ends after three calm builds", () => {
    const points = series([...level(-9, 20), ...rise(20), ...level(-9, 10)]);
    expect(eventsOf(points)).toEqual(["climb 30", "end 42"]);
    expect(points[42]?.cusum).toBe(0);
  });

  it("is not told of one build alone, nor of a rise of less than a decade that lasts", () => {
    expect(eventsOf(series([...level(-9, 20), ...level(-8.1, 200)]))).toEqual([]);
    const spiky = Array.from({ length: 200 }, (_, k) => itemOf(k % 4 === 3 ? -7.95 : -8.5));
    expect(eventsOf(series([...level(-9, 20), ...spiky])).filter((event) => event.startsWith("climb"))).toEqual([]);
  });

  it("does not end while it is calm for two builds only", () => {
    const restless = [...level(-9, 2), itemOf(-7), ...level(-9, 2), itemOf(-7)];
    const events = eventsOf(series([...level(-9, 20), ...rise(20), ...restless]));
    expect(events.filter((event) => event.startsWith("end"))).toEqual([]);
  });

  it("is told anew after it has ended", () => {
    const points = series([...level(-9, 20), ...rise(20), ...level(-9, 10), ...rise(20)]);
    expect(eventsOf(points)).toEqual(["climb 30", "end 42", "climb 60"]);
  });

  it("is not told under the resolution of the reference", () => {
    const unseen = rise(30).map((item) => ({ ...item, resolution: Math.fround(item.derivative * 1.01) }));
    const points = series([...level(-9, 20), ...unseen]);
    expect(eventsOf(points)).toEqual([]);
    expect(points.at(-1)?.cusum).toBe(0);
    expect(points.at(-1)?.decades).toBeGreaterThan(2);
  });

  it("keeps its sum within 16, so that it is soon forgiven", () => {
    const points = series([...level(-9, 20), ...level(-8.5, 100), ...level(-9, 40)]);
    expect(points[119]?.cusum).toBe(16);
    expect(points.at(-1)?.cusum).toBe(0);
  });
});

describe("a jump", () => {
  it("is a rise of a decade in one build, and a climb if it lasts", () => {
    expect(eventsOf(series([...level(-9, 20), itemOf(-7.9), ...level(-9, 5)]))).toEqual(["jump 20"]);
    expect(eventsOf(series([...level(-9, 20), ...level(-7.9, 10)]))).toEqual(["jump 20", "climb 23"]);
  });

  it("is not the way back from a lucky cancellation", () => {
    expect(eventsOf(series([...level(-9, 20), itemOf(-12), ...level(-9, 5)]))).toEqual([]);
  });

  it("is told of a young baseline only when it is large", () => {
    expect(eventsOf(series([...level(-9, 1), itemOf(-7)]))).toEqual([]);
    expect(eventsOf(series([...level(-9, 1), itemOf(-6)]))).toEqual(["jump 1"]);
    expect(eventsOf(series([...level(-9, 4), itemOf(-6.9)]))).toEqual(["jump 4"]);
    expect(eventsOf(series([itemOf(-6)]))).toEqual([]);
  });

  it("is no news of an entry that goes to and fro", () => {
    const restless = Array.from({ length: 40 }, (_, k) => itemOf(k % 2 === 0 ? -7.5 : -9));
    expect(eventsOf(series([...level(-9, 20), ...restless]))).toEqual(["jump 20", "jump 22"]);
  });

  it("is told across builds that say nothing, and not under the resolution", () => {
    const silent = itemOf(-9, { resolution: Infinity });
    expect(eventsOf(series([...level(-9, 20), silent, null, itemOf(-7)]))).toEqual(["jump 22"]);
    expect(eventsOf(series([...level(-9, 20), itemOf(-7, { resolution: 1 })]))).toEqual([]);
  });
});

describe("builds that say nothing", () => {
  const { invalid, unreferenced, disagrees } = VERDICT_CODE;
  it.each([
    ["unreferenced", itemOf(-9, { verdict: unreferenced, resolution: NaN })],
    ["invalid", itemOf(-9, { verdict: invalid, derivative: NaN })],
    ["without resolution", itemOf(-5, { resolution: Infinity })],
    ["with a reference that is none", itemOf(-5, { reference: NaN })],
    ["with a derivative that is none", itemOf(-5, { derivative: Infinity })],
  ])("%s: change nothing", (_, silent) => {
    const history = [...level(-9, 20), ...rise(15)];
    const points = series(history.flatMap((item) => [item, silent, null]));
    expect(points.filter((_point, k) => k % 3 === 0)).toEqual(series(history));
    expect(points.filter((_point, k) => k % 3 !== 0).every((point) => point === null)).toBe(true);
  });

  it("disagrees: shows its decades, tells no climb or jump, and holds the sum", () => {
    const points = series([...level(-9, 20), itemOf(-3, { verdict: disagrees }), ...level(-9, 2)]);
    expect(points[20]).toMatchObject({ decades: 6, cusum: 0, event: null });
    expect(points[21]).toMatchObject({ decades: 0, cusum: 0, event: null });
  });

  it("disagrees: does not teach the baseline", () => {
    const points = series([
      ...level(-9, 5),
      ...level(-2, 30).map((item) => ({ ...item, verdict: disagrees })),
      itemOf(-9),
    ]);
    expect(points.at(-1)).toMatchObject({ centre: -9, decades: 0 });
  });
});

describe("an accepted baseline", () => {
  it("begins anew, ends the climb in silence and tells no jump at its first build", () => {
    const history = [...level(-9, 20), ...rise(15), ...level(-5, 10)];
    const points = series(history, new Set([35]));
    expect(eventsOf(points)).toEqual(["climb 30"]);
    expect(points.slice(35, 40).map((point) => point?.decades)).toEqual([null, null, null, null, null]);
    expect(points[40]).toMatchObject({ decades: 0, centre: -5, cusum: 0 });
  });
});

describe("edges", () => {
  it("takes no history, and no error at all", () => {
    expect(series([])).toEqual([]);
    expect(series([null, null])).toEqual([null, null]);
    const exact = series(Array.from({ length: 6 }, () => itemOf(0, { derivative: 0, reference: -0, resolution: 0 })));
    expect(exact.at(-1)?.centre).toBeCloseTo(Math.log10(2 ** -52), 3);
  });

  it("bounds the largest error at 31 decades and takes subnormal and huge numbers", () => {
    const centreOf = (item: DriftItem): number | null | undefined =>
      series(Array.from({ length: 6 }, () => item)).at(-1)?.centre;
    expect(centreOf(itemOf(0, { derivative: 1e300, floor: 1e-300 }))).toBe(31);
    expect(centreOf(itemOf(0, { derivative: 1, floor: 0 }))).toBe(31);
    expect(centreOf(itemOf(0, { derivative: 1e308, reference: -1e308, floor: 1 }))).toBeCloseTo(Math.log10(2), 3);
    expect(centreOf(itemOf(0, { derivative: 5e-324, floor: 1 }))).toBeCloseTo(-14, 3);
    expect(centreOf(itemOf(0, { derivative: 5e-324, floor: 5e-324 }))).toBe(0);
  });
});
