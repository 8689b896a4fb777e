import { either, role, scope } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const baselinePolicy = {
  "baseline.read": either(role("viewer"), scope("read")),
  "baseline.accept": role("lead"),
} satisfies PolicyTable;
