import { administrator } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const peoplePolicy = { "people.manage": administrator } satisfies PolicyTable;
