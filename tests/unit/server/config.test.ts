import { describe, expect, it } from "vitest";
import { loadConfig, SettingsError } from "../../../server/config.ts";

function problemsOf(environment: Record<string, string>): readonly string[] {
  try {
    loadConfig(environment);
  } catch (error) {
    if (error instanceof SettingsError) return error.problems;
    throw error;
  }
  return [];
}

describe("settings", () => {
  it("have safe defaults", () => {
    const config = loadConfig({});
    expect(config).toMatchObject({
      port: 4380,
      host: "127.0.0.1",
      publicUrl: "http://127.0.0.1:4380",
      secret: null,
      administrator: null,
      metricsToken: null,
      trustedProxies: 0,
      validateResponses: false,
      limits: { wireBytes: 67_108_864, decodedBytes: 268_435_456, entries: 4_000_000, blocks: 20_000 },
    });
    expect(config.databaseFile.endsWith(".data/main/clinograph.sqlite")).toBe(true);
    expect(config.judgeThreads).toBeGreaterThanOrEqual(1);
  });

  it("are all told at once where they are wrong", () => {
    const problems = problemsOf({
      PORT: "eighty",
      CLINOGRAPH_SECRET: "short",
      CLINOGRAPH_PUBLIC_URL: "ftp://example.org",
      CLINOGRAPH_MAX_BLOCKS: "-1",
      LOG_LEVEL: "loud",
    });
    for (const name of ["PORT", "CLINOGRAPH_SECRET", "CLINOGRAPH_PUBLIC_URL", "CLINOGRAPH_MAX_BLOCKS", "LOG_LEVEL"]) {
      expect(
        problems.some((problem) => problem.startsWith(`${name}: `)),
        name,
      ).toBe(true);
    }
    expect(problems).toHaveLength(5);
  });

  it("want the administrator's address and password together, and a password of some length", () => {
    expect(problemsOf({ CLINOGRAPH_ADMIN_EMAIL: "ada@example.org" })).toHaveLength(1);
    expect(problemsOf({ CLINOGRAPH_ADMIN_EMAIL: "ada@example.org", CLINOGRAPH_ADMIN_PASSWORD: "short" })[0]).toContain(
      "CLINOGRAPH_ADMIN_PASSWORD",
    );
    const config = loadConfig({ CLINOGRAPH_ADMIN_EMAIL: "Ada@Example.org", CLINOGRAPH_ADMIN_PASSWORD: "a".repeat(12) });
    expect(config.administrator).toEqual({ email: "ada@example.org", password: "aaaaaaaaaaaa" });
  });

  it("take an empty value for none, and never an empty text for zero", () => {
    expect(loadConfig({ PORT: "", CLINOGRAPH_SECRET: "" })).toMatchObject({ port: 4380, secret: null });
    expect(problemsOf({ PORT: " " })).toHaveLength(1);
    expect(problemsOf({ PORT: "1e3" })).toHaveLength(1);
  });

  it("drop the slash at the end of the public address and bracket IPv6 hosts", () => {
    expect(loadConfig({ CLINOGRAPH_PUBLIC_URL: "https://c.example/grad/" }).publicUrl).toBe("https://c.example/grad");
    expect(loadConfig({ HOST: "::1" }).publicUrl).toBe("http://[::1]:4380");
  });
});
