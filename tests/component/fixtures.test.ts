import { expect, it } from "vitest";
import { blockDetail, blockRow, historyItem } from "../../shared/schemas/block.ts";
import { breakDetail, breakRow } from "../../shared/schemas/break.ts";
import { buildRow } from "../../shared/schemas/build.ts";
import { strip } from "../../shared/schemas/commit.ts";
import { overview, project, projectRow } from "../../shared/schemas/project.ts";
import { blockFixture, blockRowsFixture, historyFixture } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";
import * as record from "./fixtures/record.ts";

/** The pages are tested with what the server's schemas allow, not with what the pages would like. */
it("fixtures are what the contract says", () => {
  const drawn = stripFixture();
  strip.parse(drawn);
  project.parse(record.projectFixture());
  projectRow.parse(record.projectRowFixture(drawn));
  overview.parse(record.overviewFixture(drawn));
  breakRow.parse(record.breakRowFixture(drawn));
  breakDetail.parse(record.breakFixture(drawn));
  buildRow.parse(record.buildFixture(drawn));
  blockDetail.parse(blockFixture(drawn));
  for (const row of blockRowsFixture()) blockRow.parse(row);
  for (const item of historyFixture(drawn)) historyItem.parse(item);
  expect(drawn.columns.length).toBe(108);
});
