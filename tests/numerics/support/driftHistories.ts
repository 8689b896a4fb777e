import fc from "fast-check";
import { VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import { advanceDrift } from "../../../shared/numerics/drift/advanceDrift.ts";
import { isQuiet } from "../../../shared/numerics/drift/isQuiet.ts";
import { newDriftState } from "../../../shared/numerics/drift/newDriftState.ts";
import { packDrift } from "../../../shared/numerics/drift/packDrift.ts";
import { resizeDrift } from "../../../shared/numerics/drift/resizeDrift.ts";
import { restartDrift } from "../../../shared/numerics/drift/restartDrift.ts";
import type { DriftEventKind, DriftItem, DriftState } from "../../../shared/numerics/drift/types.ts";
import { unpackDrift } from "../../../shared/numerics/drift/unpackDrift.ts";
import { itemOf, valuesOf } from "./driftTrials.ts";

/** What happens to a block with one build; the moves are in twentieths of a decade, one an entry. */
type Step =
  | { readonly kind: "build"; readonly moves: readonly number[]; readonly flaw: DriftFlaw }
  | { readonly kind: "repeat"; readonly times: number }
  | { readonly kind: "gap" | "grow" | "pack" }
  | { readonly kind: "restart"; readonly entry: number | null };
type DriftFlaw = "none" | "disagrees" | "unreferenced" | "cannot tell" | "within";

const ENTRIES = 3;
/** Most entries stay about where they are, some climb, few leap. */
const move = fc.oneof(
  { weight: 10, arbitrary: fc.integer({ min: -2, max: 4 }) },
  { weight: 1, arbitrary: fc.integer({ min: -60, max: 60 }) },
);
const flaw = fc.oneof(
  { weight: 12, arbitrary: fc.constant<DriftFlaw>("none") },
  { weight: 1, arbitrary: fc.constantFrom<DriftFlaw>("disagrees", "unreferenced", "cannot tell", "within") },
);
const step = fc.oneof(
  {
    weight: 24,
    arbitrary: fc.record({
      kind: fc.constant("build" as const),
      moves: fc.array(move, { minLength: ENTRIES, maxLength: ENTRIES }),
      flaw,
    }),
  },
  {
    weight: 6,
    arbitrary: fc.record({ kind: fc.constant("repeat" as const), times: fc.constantFrom(1, 1, 2, 7, 30) }),
  },
  { weight: 3, arbitrary: fc.record({ kind: fc.constantFrom("gap" as const, "grow" as const, "pack" as const) }) },
  {
    weight: 1,
    arbitrary: fc.record({
      kind: fc.constant("restart" as const),
      entry: fc.option(fc.integer({ min: 0, max: ENTRIES - 1 })),
    }),
  },
);
/** Histories of a block of up to three entries; the levels fall back now and then, so that climbs end. */
export const histories: fc.Arbitrary<readonly Step[]> = fc.array(step, { minLength: 1, maxLength: 140, size: "max" });

/** One entry's history, and what the state told of it. */
export interface PlayedEntry {
  readonly items: (DriftItem | null)[];
  readonly restarts: Set<number>;
  readonly points: ({ readonly cusum: number; readonly event: DriftEventKind | null } | null)[];
}

export interface Played {
  readonly state: DriftState;
  readonly entries: readonly PlayedEntry[];
}

/** Plays a history on a running state, and keeps for each entry what the definition needs. */
export function playHistory(history: readonly Step[]): Played {
  const entries = Array.from({ length: ENTRIES }, (): PlayedEntry => ({ items: [], restarts: new Set(), points: [] }));
  const levels = Array<number>(ENTRIES).fill(-180);
  let state = newDriftState(1);
  let last: readonly DriftItem[] | null = null;
  let id = 0;
  const note = (items: readonly (DriftItem | null)[] | null, event: (k: number) => DriftEventKind | null): void => {
    entries.forEach(({ items: own, points }, k) => {
      const item = items?.[k] ?? null;
      own.push(item);
      points.push(item === null || isSilent(item) ? null : { cusum: state.cusum[k] ?? NaN, event: event(k) });
    });
  };
  const take = (items: readonly DriftItem[], values: ReturnType<typeof valuesOf> | null): void => {
    id += 1;
    const { climbs, jumps, ends } = advanceDrift(state, id, values);
    note(items, (k) => {
      if (climbs.entries.includes(k)) return "climb";
      if (ends.entries.includes(k)) return "end";
      return jumps.entries.includes(k) ? "jump" : null;
    });
  };
  for (const step of history) {
    if (step.kind === "build") {
      step.moves.forEach((by, k) => (levels[k] = wrapped((levels[k] ?? 0) + by)));
      last = Array.from(state.count, (_, k) => flawed((levels[k] ?? 0) / 20, k === 0 ? step.flaw : "none"));
      take(last, valuesOf(last));
    } else if (step.kind === "repeat" && last !== null) {
      const items = last;
      if (step.times > 1 && isQuiet(state)) {
        const single = unpackDrift(packDrift(state));
        advanceDrift(state, id + step.times, null, step.times);
        const whole = state;
        state = single;
        for (let n = 0; n < step.times; n += 1) take(items, null);
        state = whole;
      } else {
        take(items, null);
      }
    } else if (step.kind === "gap") {
      note(null, () => null);
    } else if (step.kind === "grow" && state.count.length < ENTRIES) {
      state = resizeDrift(state, state.count.length + 1);
      last = null;
    } else if (step.kind === "pack") {
      state = unpackDrift(packDrift(state));
    } else if (step.kind === "restart") {
      const chosen = step.entry === null ? null : Uint32Array.of(Math.min(step.entry, state.count.length - 1));
      restartDrift(state, chosen);
      entries.forEach(({ items, restarts }, k) => {
        if (chosen === null || chosen.includes(k)) restarts.add(items.length);
      });
    }
  }
  return { state, entries };
}

/** Levels between -12 and -4 decades: what leaves at the top comes back near the start. */
function wrapped(level: number): number {
  return level > -80 || level < -240 ? -180 : level;
}

function flawed(g: number, flaw: DriftFlaw): DriftItem {
  const item = itemOf(g);
  if (flaw === "disagrees") return { ...item, verdict: VERDICT_CODE.disagrees };
  if (flaw === "unreferenced") return { ...item, verdict: VERDICT_CODE.unreferenced, resolution: NaN };
  if (flaw === "cannot tell") return { ...item, verdict: VERDICT_CODE.unresolved, resolution: Infinity };
  if (flaw === "within") return { ...item, resolution: Math.fround(item.derivative * 2) };
  return item;
}

/** As in the definition: of these only a disagreement leaves a point. */
function isSilent({ verdict, resolution }: DriftItem): boolean {
  return verdict === VERDICT_CODE.unreferenced || !(resolution < Infinity);
}
