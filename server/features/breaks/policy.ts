import { either, role, scope } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const breakPolicy = {
  "break.read": either(role("viewer"), scope("read")),
  "break.comment": role("developer"),
  "break.assign": role("developer"),
} satisfies PolicyTable;
