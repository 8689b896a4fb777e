import type { Browser, BrowserContext } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { BreakDetail, BreakRow } from "../../shared/schemas/break.ts";
import { ask, DESK, launch, open, POCKET, settled, violations } from "./support/browser.ts";
import type { Look } from "./support/browser.ts";

let browser: Browser;
beforeAll(async () => {
  browser = await launch();
});
afterAll(() => browser.close());

async function addresses(context: BrowserContext): Promise<Record<string, string>> {
  const { items } = await ask<{ items: BreakRow[] }>(context, "/projects/tidewheel/breaks?state=open");
  const record = await ask<BreakDetail>(context, `/projects/tidewheel/breaks/${items[0]?.id}`);
  const build = `/projects/tidewheel/builds/${record.onset.buildId}`;
  return {
    projects: "/",
    overview: "/projects/tidewheel",
    breaks: "/projects/tidewheel/breaks",
    break: `/projects/tidewheel/breaks/${record.id}`,
    builds: "/projects/tidewheel/builds",
    build,
    block: `${build}/blocks/${record.entries[0]?.blockId}`,
    members: "/projects/tidewheel/members",
    tokens: "/projects/tidewheel/tokens",
    "no such page": "/nowhere",
  };
}

const LOOKS: Record<string, Look> = {
  "a desk by day": DESK,
  "a desk by night": { ...DESK, theme: "dark" },
  "a pocket by day": { ...POCKET, theme: "light" },
  "a pocket by night": POCKET,
};

describe.each(Object.entries(LOOKS))("on %s", (_name, look) => {
  it("sign-in keeps the rules of WCAG 2.2 AA", async () => {
    const { context, page, errors } = await open(browser, null, look);
    await page.goto("/");
    await settled(page);
    expect(await page.locator("h1").innerText()).toContain("Sign in");
    expect(await violations(page)).toEqual([]);
    expect(errors).toEqual([]);
    await context.close();
  });

  it("every page has a headline, fits the width and keeps the rules of WCAG 2.2 AA", async () => {
    const { context, page, errors } = await open(browser, "lead", look);
    for (const [name, address] of Object.entries(await addresses(context))) {
      await page.goto(address);
      await settled(page);
      expect((await page.locator("h1").first().innerText()).trim(), name).not.toBe("");
      const over = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      expect(over, `${name} is wider than the window`).toBeLessThanOrEqual(0);
      expect(await violations(page), name).toEqual([]);
    }
    expect(errors).toEqual([]);
    await context.close();
  });
});
