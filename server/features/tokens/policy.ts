import { role } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const tokenPolicy = { "token.manage": role("lead") } satisfies PolicyTable;
