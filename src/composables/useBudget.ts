import { computed } from "vue";
import { useRoute } from "vue-router";
import type { Budget } from "../queries/plan.ts";
import { useCursor } from "./useCursor.ts";

const USUAL: Budget = { unit: "evaluations", amount: 100 };

/** What a build may spend on checks: in the address, so that a link says it too. */
export function useBudget() {
  const route = useRoute();
  const { put } = useCursor();
  const budget = computed<Budget>(() => {
    const amount = Number(route.query.budget);
    const unit = route.query.unit === "seconds" ? "seconds" : "evaluations";
    return amount >= 1e-6 && amount <= 1e12 ? { unit, amount } : { ...USUAL, unit };
  });
  const spend = (next: Budget) => put({ budget: String(next.amount), unit: next.unit }, true);
  return { budget, spend };
}
