import { reactive, ref } from "vue";
import type { ZodType } from "zod";
import { asProblem } from "../api/problem.ts";
import "../plugins/zodWords.ts";

/**
 * One form: values, an error per field from the schema that the server uses too, then from the server's own answer.
 * Errors show after the first attempt, and go as soon as the field is right.
 */
export function useForm<T extends Record<string, unknown>>(
  values: T,
  schema: () => ZodType,
  send: (values: T) => Promise<void>,
) {
  const fields = reactive({ ...values }) as T;
  const errors = ref<Partial<Record<string, string>>>({});
  const problem = ref<string | null>(null);
  const busy = ref(false);
  let attempted = false;

  function check(): boolean {
    const result = schema().safeParse(fields);
    const found: Partial<Record<string, string>> = {};
    for (const issue of result.error?.issues ?? []) found[String(issue.path[0] ?? "")] ??= issue.message;
    errors.value = found;
    return result.success;
  }
  /** Call when a field changed. */
  function changed(): void {
    problem.value = null;
    if (attempted) check();
  }
  async function submit(): Promise<void> {
    attempted = true;
    problem.value = null;
    if (busy.value || !check()) return;
    busy.value = true;
    try {
      await send(fields);
      attempted = false;
    } catch (error) {
      const told = asProblem(error);
      const named = Object.keys(fields).filter((name) => told.fieldError(name) !== undefined);
      errors.value = Object.fromEntries(named.map((name) => [name, told.fieldError(name)]));
      problem.value = named.length > 0 ? null : told.message;
    } finally {
      busy.value = false;
    }
  }
  return { fields, errors, problem, busy, changed, submit };
}
