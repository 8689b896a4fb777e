import { either, role, scope } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const waiverPolicy = {
  "waiver.read": either(role("viewer"), scope("read")),
  "waiver.ask": role("developer"),
  "waiver.decide": role("lead"),
} satisfies PolicyTable;
