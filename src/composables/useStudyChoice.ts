import { computed } from "vue";
import { useRoute } from "vue-router";
import type { BlockDetail } from "../../shared/schemas/block.ts";
import type { StudyWanted } from "../queries/steps.ts";
import { useCursor } from "./useCursor.ts";

/** A reference of a block and one of its columns. */
export interface StudyChoice {
  readonly reference: number;
  readonly column: number;
}

/** Blocks up to this size are studied unasked; a study reads every value that a reference posted. */
const UNASKED_ENTRIES = 250_000;

/**
 * Reference and column of the step study live in the address as `?study=reference.column`; without them it is the
 * first sweep, else the first reference with a step, at the column of the worst entry where that is covered.
 */
export function useStudyChoice(block: () => BlockDetail | undefined) {
  const route = useRoute();
  const { put } = useCursor();
  const asked = computed<StudyChoice | null>(() => {
    const match = /^(\d{1,2})\.(\d{1,9})$/.exec(String(route.query.study ?? ""));
    return match ? { reference: Number(match[1]), column: Number(match[2]) } : null;
  });
  const chosen = computed<StudyChoice | null>(() => {
    const { references, columns, worst } = block() ?? { references: [], columns: 0, worst: null };
    if (references.length === 0 || columns === 0) return null;
    const { reference, column } = asked.value ?? { reference: firstWithSteps(references), column: worst?.column ?? 0 };
    const known = Math.min(reference, references.length - 1);
    const covered = references[known]?.columns ?? null;
    const inside = Math.min(column, columns - 1);
    return { reference: known, column: covered === null || covered.includes(inside) ? inside : Math.min(...covered) };
  });
  /** What is to be asked of the server; null while a large block's study was not asked for. */
  const wanted = computed<StudyWanted | null>(() => {
    const known = block();
    if (!known || !chosen.value) return null;
    const { rows, columns, buildId: build, blockId } = known;
    if (asked.value === null && rows * columns > UNASKED_ENTRIES) return null;
    return { build, block: blockId, columns, ...chosen.value };
  });
  const choose = ({ reference, column }: StudyChoice) => put({ study: `${reference}.${column}` }, true);
  return { chosen, wanted, choose };
}

/** A sweep tells most, a single step some, a method without steps nothing. */
function firstWithSteps(references: BlockDetail["references"]): number {
  const sweep = references.findIndex(({ steps }) => steps.length > 1);
  return Math.max(0, sweep >= 0 ? sweep : references.findIndex(({ steps }) => steps.length > 0));
}
