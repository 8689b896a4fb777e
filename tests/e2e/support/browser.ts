import { readFile } from "node:fs/promises";
import { createRequire } from "node:module";
import { chromium } from "playwright-core";
import type { Browser, BrowserContext, Page } from "playwright-core";
import { inject } from "vitest";
import { DEMO_PASSWORD } from "../../../scripts/demo/people.ts";

export type DemoRole = "viewer" | "developer" | "lead" | "admin";

export interface Look {
  readonly width: number;
  readonly height: number;
  readonly theme: "light" | "dark";
}
export const DESK: Look = { width: 1440, height: 900, theme: "light" };
export const POCKET: Look = { width: 390, height: 844, theme: "dark" };

/** Without these Chromium calls out at every start, and as root it needs its sandbox off. */
const QUIET = [
  "--no-sandbox",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
];

export function launch(): Promise<Browser> {
  return chromium.launch({ executablePath: process.env.CHROMIUM_PATH ?? "/usr/bin/chromium", args: QUIET });
}

/** A browser window of somebody of the demo, signed in where a role is given. Errors on the page are kept. */
export async function open(
  browser: Browser,
  role: DemoRole | null,
  look: Look = DESK,
): Promise<{ context: BrowserContext; page: Page; errors: string[] }> {
  const context = await browser.newContext({
    baseURL: inject("url"),
    viewport: { width: look.width, height: look.height },
    colorScheme: look.theme,
    reducedMotion: "reduce",
    permissions: ["clipboard-read", "clipboard-write"],
  });
  if (role !== null) {
    const answer = await context.request.post("/api/v1/session", {
      data: { email: `${role}@tidewheel.example`, password: DEMO_PASSWORD },
    });
    if (!answer.ok()) throw new Error(`signing in as ${role} was answered with ${answer.status()}`);
  }
  const page = await context.newPage();
  const errors: string[] = [];
  page.on("pageerror", (error) => errors.push(error.message));
  page.on("console", (message) => {
    if (/Content Security Policy/.test(message.text())) errors.push(message.text());
  });
  return { context, page, errors };
}

/** Waits until nothing is being fetched and the page has its headline. */
export async function settled(page: Page): Promise<void> {
  await page.waitForLoadState("networkidle");
  await page.locator("h1").first().waitFor();
}

const axeFile = createRequire(import.meta.url).resolve("axe-core/axe.min.js");
const TAGS = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"];

interface AxeResults {
  readonly violations: readonly { id: string; nodes: readonly { target: unknown; failureSummary?: string }[] }[];
}

/** What breaks the rules of WCAG 2.2 A and AA on the page, in words; by axe-core. */
export async function violations(page: Page): Promise<string[]> {
  await page.evaluate(await readFile(axeFile, "utf8"));
  const results = (await page.evaluate(
    `axe.run(document, { runOnly: ${JSON.stringify(TAGS)}, resultTypes: ["violations"] })`,
  )) as AxeResults;
  return results.violations.flatMap(({ id, nodes }) =>
    nodes.map(({ target, failureSummary }) => `${id}: ${JSON.stringify(target)} ${failureSummary ?? ""}`),
  );
}

/** Answers of the API to the person signed in. */
export async function ask<T>(context: BrowserContext, path: string): Promise<T> {
  const answer = await context.request.get(`/api/v1${path}`);
  if (!answer.ok()) throw new Error(`${path} was answered with ${answer.status()}`);
  return (await answer.json()) as T;
}
