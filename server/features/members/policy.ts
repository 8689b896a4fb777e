import { role } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const memberPolicy = {
  "member.read": role("viewer"),
  "member.manage": role("lead"),
} satisfies PolicyTable;
