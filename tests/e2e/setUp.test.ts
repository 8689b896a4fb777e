import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import type { Browser, Page } from "playwright-core";
import { afterAll, beforeAll, expect, it } from "vitest";
import { startBuiltServer } from "../support/builtServer.ts";
import type { BuiltServer } from "../support/builtServer.ts";
import { launch, settled, violations } from "./support/browser.ts";

let browser: Browser;
let folder: string;
let server: BuiltServer;
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), "clinograph-e2e-"));
  server = await startBuiltServer(folder);
  browser = await launch();
});
afterAll(async () => {
  await browser.close();
  await server.stop();
  await rm(folder, { recursive: true, force: true });
});

async function fillIn(page: Page): Promise<void> {
  await page.getByLabel("Name").fill("First Person");
  await page.getByLabel("E-mail").fill("first@example.org");
  await page.getByLabel("Password").first().fill("a sentence that nobody guesses");
  await page.keyboard.press("Enter");
}

it("leads from the printed link, for once, to a first project that says how to post", async () => {
  const link = /http:\S+#\S+/.exec(server.output())?.[0] ?? "";
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, reducedMotion: "reduce" });
  const page = await context.newPage();
  await page.goto(link);
  await settled(page);
  expect(await violations(page)).toEqual([]);
  await fillIn(page);
  await page.waitForURL((url) => url.pathname === "/");
  await settled(page);
  expect(await violations(page)).toEqual([]);
  await page.getByRole("button", { name: "Open a project" }).click();
  const form = page.getByRole("form", { name: "Open a project" });
  await form.getByLabel("Name in addresses").fill("hull");
  await form.getByLabel("What it is").fill("Hull");
  await form.getByRole("button", { name: "Open it" }).click();
  await page.waitForURL("**/projects/hull*");
  await settled(page);
  expect(await page.locator("main").innerText()).toMatch(/report\.mjs|curl/);
  expect(await violations(page)).toEqual([]);
  await context.clearCookies();
  await page.goto(link);
  await fillIn(page);
  await page.getByText(/This link is not valid/).waitFor();
  await context.close();
});
