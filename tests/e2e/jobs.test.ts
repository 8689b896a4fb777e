import type { Browser } from "playwright-core";
import { afterAll, beforeAll, describe, expect, inject, it } from "vitest";
import type { BreakRow } from "../../shared/schemas/break.ts";
import type { Strip } from "../../shared/schemas/commit.ts";
import { DEMO_PASSWORD } from "../../scripts/demo/people.ts";
import { ask, launch, open, settled } from "./support/browser.ts";

let browser: Browser;
beforeAll(async () => {
  browser = await launch();
});
afterAll(() => browser.close());

describe("signing in", () => {
  it("comes back to the page that was asked for, and says when the password is wrong", async () => {
    const { context, page } = await open(browser, null);
    await page.goto("/projects/tidewheel/breaks");
    await page.getByLabel("E-mail").fill("developer@tidewheel.example");
    await page.getByLabel("Password").fill("not the password");
    await page.keyboard.press("Enter");
    await page.getByText(/address or the password is not right/).waitFor();
    await page.getByLabel("Password").fill(DEMO_PASSWORD);
    await page.keyboard.press("Enter");
    await page.waitForURL("**/projects/tidewheel/breaks*");
    await settled(page);
    expect(await page.getByRole("link", { name: /stopped agreeing/ }).count()).toBeGreaterThan(0);
    await context.close();
  });

  it("asks again, for the same place, when the session has ended", async () => {
    const { context, page } = await open(browser, "developer");
    await page.goto("/projects/tidewheel/builds");
    await settled(page);
    await context.clearCookies();
    await page.goto("/projects/tidewheel/breaks");
    await page.getByLabel("E-mail").waitFor();
    expect(new URL(page.url()).searchParams.get("next")).toContain("/projects/tidewheel/breaks");
    await context.close();
  });
});

describe("the strip", () => {
  it("moves the cursor by keys, tells it in the address, and goes back by the browser", async () => {
    const { context, page } = await open(browser, "viewer");
    const strip = await ask<Strip>(context, "/projects/tidewheel/strip?lane=gcc-release");
    await page.goto("/projects/tidewheel");
    await settled(page);
    const chart = page.getByRole("slider").first();
    await chart.focus();
    await page.keyboard.press("Home");
    await page.waitForURL((url) => url.searchParams.get("at") === strip.columns[0]?.commit);
    await page.keyboard.press("ArrowRight");
    await page.waitForURL((url) => url.searchParams.get("at") === strip.columns[1]?.commit);
    await page.keyboard.press("End");
    await page.waitForURL((url) => url.searchParams.get("at") === strip.columns.at(-1)?.commit);
    await context.close();
  });
});

describe("a break", () => {
  it("tells its story, takes a comment, an assignee and a wish for the next test", async () => {
    const { context, page, errors } = await open(browser, "developer");
    const { items } = await ask<{ items: BreakRow[] }>(context, "/projects/tidewheel/breaks?state=open");
    const row = items.find((one) => one.suspectCount > 1) as BreakRow;
    await page.goto(`/projects/tidewheel/breaks/${row.id}`);
    await settled(page);
    expect(await page.locator("h1").innerText()).toMatch(/stopped agreeing/);
    await page.getByLabel("Write a comment").fill("Per cent again?");
    await page.getByRole("button", { name: "Add the comment" }).click();
    await page.getByText("Per cent again?").waitFor();
    await page
      .getByRole("button", { name: /next|build/i })
      .first()
      .click();
    await expect
      .poll(async () => (await ask<{ items: { reason: string }[] }>(context, "/projects/tidewheel/wanted")).items)
      .toContainEqual(expect.objectContaining({ reason: "requested" }));
    expect(errors).toEqual([]);
    await context.close();
  });

  it("lets a developer ask for a waiver and copy the story as Markdown", async () => {
    const { context, page } = await open(browser, "developer");
    const { items } = await ask<{ items: BreakRow[] }>(context, "/projects/tidewheel/breaks?state=open");
    await page.goto(`/projects/tidewheel/breaks/${items[0]?.id}`);
    await settled(page);
    await page.getByRole("button", { name: "Copy as Markdown" }).click();
    await expect.poll(() => page.evaluate(() => navigator.clipboard.readText())).toContain(items[0]?.models[0]);
    await page.getByRole("button", { name: "Ask for a waiver" }).click();
    const dialog = page.getByRole("dialog");
    await dialog.getByLabel("Reason").fill("The survey's order is mended next week.");
    await dialog.getByRole("button", { name: "Ask for it" }).click();
    await expect
      .poll(async () => (await ask<{ items: { state: string }[] }>(context, "/projects/tidewheel/waivers")).items)
      .toContainEqual(expect.objectContaining({ state: "asked" }));
    await context.close();
  });

  it("offers a viewer nothing that is refused", async () => {
    const { context, page } = await open(browser, "viewer");
    const { items } = await ask<{ items: BreakRow[] }>(context, "/projects/tidewheel/breaks?state=open");
    await page.goto(`/projects/tidewheel/breaks/${items[0]?.id}`);
    await settled(page);
    expect(await page.getByRole("button", { name: "Add the comment" }).count()).toBe(0);
    expect(await page.getByRole("button", { name: "Ask for a waiver" }).count()).toBe(0);
    await context.close();
  });
});

describe("a block", () => {
  it("shows the entry under the cursor of the matrix map, moved by keys", async () => {
    const { context, page } = await open(browser, "viewer");
    const { items } = await ask<{ items: BreakRow[] }>(context, "/projects/tidewheel/breaks?state=open");
    const wake = items.find((one) => one.models.includes("wake.deficit")) as BreakRow;
    const blocks = await ask<{ items: { blockId: string; model: string }[] }>(
      context,
      `/projects/tidewheel/builds/${wake.onset.buildId}/blocks`,
    );
    const block = blocks.items.find((one) => one.model === "wake.deficit");
    await page.goto(`/projects/tidewheel/builds/${wake.onset.buildId}/blocks/${block?.blockId}`);
    await settled(page);
    const heading = page.getByRole("heading", { name: /^Row \d+/ });
    const before = await heading.innerText();
    await page.getByRole("application").focus();
    await page.keyboard.press("ArrowDown");
    await page.keyboard.press("ArrowLeft");
    await expect.poll(() => heading.innerText()).not.toBe(before);
    await context.close();
  });
});

describe("people and tokens", () => {
  it("shows a token once, which posts at once and opens nothing after it was revoked", async () => {
    const { context, page } = await open(browser, "lead");
    await page.goto("/projects/tidewheel/tokens");
    await settled(page);
    await page.getByLabel("Name").fill("nightly");
    await page.getByRole("button", { name: /make/i }).click();
    const text = (await page.getByRole("status").locator("code").innerText()).trim();
    expect(text).toMatch(/^clg_/);
    const job = await browser.newContext({
      baseURL: inject("url"),
      extraHTTPHeaders: { Authorization: `Bearer ${text}` },
    });
    const read = async () =>
      (await job.request.get(`/api/v1/projects/tidewheel/gate?commit=${"0".repeat(40)}`)).status();
    expect(await read()).toBe(200);
    await page.reload();
    await settled(page);
    expect(await page.getByText(text).count()).toBe(0);
    await page
      .getByRole("row", { name: /nightly/ })
      .getByRole("button", { name: /^Revoke/ })
      .click();
    await page.getByRole("button", { name: "Revoke nightly" }).click();
    await expect.poll(read).toBe(401);
    await job.close();
    await context.close();
  });

  it("invites a person by a one-time link that lets them in", async () => {
    const { context, page } = await open(browser, "lead");
    await page.goto("/projects/tidewheel/members");
    await settled(page);
    const form = page.getByRole("form", { name: "Invite a person" });
    await form.getByLabel("E-mail").fill("newcomer@tidewheel.example");
    await form.getByRole("button", { name: "Invite" }).click();
    const link = (
      await page
        .getByText(/https?:\/\/.*#/)
        .first()
        .innerText()
    ).trim();
    const guest = await open(browser, null);
    await guest.page.goto(new URL(link).pathname + new URL(link).hash);
    await settled(guest.page);
    await guest.page.getByLabel("Name").fill("New Comer");
    await guest.page.getByLabel("Password").first().fill("a long sentence of mine");
    await guest.page.keyboard.press("Enter");
    await guest.page.waitForURL((url) => !url.pathname.includes("invitation"));
    await guest.page.goto("/projects/tidewheel");
    await settled(guest.page);
    expect(await guest.page.locator("h1").innerText()).not.toMatch(/Sign in/);
    await guest.context.close();
    await context.close();
  });

  it("does not let a viewer see the tokens", async () => {
    const { context, page } = await open(browser, "viewer");
    await page.goto("/projects/tidewheel/tokens");
    await settled(page);
    expect(await page.getByRole("button", { name: /make/i }).count()).toBe(0);
    expect((await context.request.get("/api/v1/projects/tidewheel/tokens")).status()).toBe(403);
    await context.close();
  });
});
