import { role } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const auditPolicy = { "audit.read": role("lead") } satisfies PolicyTable;
