import { planChecks } from "../../../shared/plan/planChecks.ts";
import type { Plan, PlanColumn } from "../../../shared/plan/types.ts";

export interface SimulatedColumn {
  readonly block: number;
  readonly column: number;
  readonly cost: number;
}

export interface Simulation {
  readonly columns: readonly SimulatedColumn[];
  readonly budget: number;
  readonly builds: number;
  /** What a check of a column is worth at a build. */
  value(column: SimulatedColumn, waited: number, build: number): number;
  /** Columns that are posted for the first time with a build. */
  newcomers(build: number): readonly SimulatedColumn[];
}

/** A promise that was not kept, or money that was not there. */
export interface Fault {
  readonly build: number;
  readonly text: string;
}

interface Waiting extends SimulatedColumn {
  waited: number;
  /** What the plan right after its last check (or its first posting) promised. */
  promised: number | null;
}

/** Builds that follow their plans, one after another; answers with every promise that was broken. */
export function simulateBuilds(simulation: Simulation): { faults: Fault[]; longest: number; last: Plan } {
  const waiting: Waiting[] = simulation.columns.map((one) => ({ ...one, waited: 0, promised: null }));
  const faults: Fault[] = [];
  let longest = 0;
  let last = planChecks([], simulation.budget);
  for (let build = 1; build <= simulation.builds; build++) {
    last = planChecks(
      waiting.map((one): PlanColumn => ({ ...one, value: simulation.value(one, one.waited, build) })),
      simulation.budget,
    );
    if (last.spent > simulation.budget * (1 + 1e-9)) faults.push({ build, text: `spends ${last.spent}` });
    const chosen = new Set(last.chosen);
    for (const [at, one] of waiting.entries()) {
      if (one.waited === 0) one.promised = last.everyBuilds;
      one.waited += 1;
      longest = Math.max(longest, one.waited);
      if (one.promised !== null && one.waited > one.promised) {
        faults.push({ build, text: `column ${one.block}/${one.column} waits ${one.waited}, promised ${one.promised}` });
      }
      if (chosen.has(at)) one.waited = 0;
    }
    waiting.push(...simulation.newcomers(build).map((one) => ({ ...one, waited: 0, promised: null })));
  }
  return { faults, longest, last };
}
