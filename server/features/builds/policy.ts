import { either, role, scope } from "../../http/policy.ts";
import type { PolicyTable } from "../../http/policy.ts";

const readers = either(role("viewer"), scope("read"));
const posters = either(role("developer"), scope("post"));

export const buildPolicy = {
  "build.read": readers,
  "gate.read": readers,
  "build.post": posters,
  "build.close": posters,
  "commit.post": posters,
  "wanted.ask": role("developer"),
} satisfies PolicyTable;
