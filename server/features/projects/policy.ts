import { administrator, anyCaller, either, role, scope } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

export const projectPolicy = {
  "project.list": anyCaller,
  "project.create": administrator,
  "project.read": either(role("viewer"), scope("read")),
  "project.edit": role("lead"),
} satisfies PolicyTable;
