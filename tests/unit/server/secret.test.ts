import { mkdtemp, rm, stat } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { expect, it } from "vitest";
import { loadConfig } from "../../../server/config.ts";
import { derivedKey, keptSecret } from "../../../server/secret.ts";

it("is made once, kept for its owner's eyes, and gives way to a configured one", async () => {
  const folder = await mkdtemp(join(tmpdir(), "clinograph-secret-"));
  const config = loadConfig({ CLINOGRAPH_DATA: folder });
  const first = keptSecret(config);
  expect(first).toMatch(/^[0-9a-f]{64}$/);
  expect(keptSecret(config)).toBe(first);
  expect((await stat(join(folder, "secret"))).mode & 0o777).toBe(0o600);
  const given = "configured by the operator, long enough";
  expect(keptSecret(loadConfig({ CLINOGRAPH_DATA: folder, CLINOGRAPH_SECRET: given }))).toBe(given);
  await rm(folder, { recursive: true });
});

it("gives every purpose a key of its own", () => {
  expect(derivedKey("s", "session")).toHaveLength(32);
  expect(derivedKey("s", "session").equals(derivedKey("s", "csrf"))).toBe(false);
  expect(derivedKey("s", "session").equals(derivedKey("t", "session"))).toBe(false);
});
