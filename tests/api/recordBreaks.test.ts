import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { Comment } from "../../server/db/models/Comment.ts";
import { User } from "../../server/db/models/User.ts";
import type { BuildDocument } from "../../shared/schemas/build.ts";
import { blockOf, buildOf, commitOf, flipped, numbers, shaOf, THRUST } from "../support/hull.ts";
import { openRecord } from "../support/record.ts";
import type { TestRecord } from "../support/record.ts";

type Block = BuildDocument["blocks"][number];

let record: TestRecord;
beforeEach(async () => {
  record = await openRecord();
});
afterEach(() => record.dispose());

/** rotor.thrust with these entries turned about. */
const wrong = (...entries: [number, number][]): Block =>
  blockOf({ model: "rotor.thrust", derivative: flipped(THRUST, entries), reference: THRUST });
const good = wrong();

interface Known {
  readonly id: number;
  readonly onset: string;
  readonly state: string;
  readonly repairedBy: string | null;
  readonly entryCount: number;
  readonly withdrawn: 0 | 1;
  readonly supersededById: number | null;
}
const breaks = () =>
  record.context.db.select<Known>(
    `SELECT id, onset, state, repairedBy, entryCount, withdrawnAt IS NOT NULL AS withdrawn, supersededById
     FROM breaks ORDER BY id`,
  );
const standing = async () => (await breaks()).filter(({ withdrawn }) => withdrawn === 0);

async function post(n: number, block: Block, parents?: number[], branch?: string, wish = {}): Promise<void> {
  await record.post(buildOf(commitOf(n, parents, branch), [block], wish));
}

async function comment(breakId: number, body: string): Promise<void> {
  const createdAt = Date.now();
  await record.context.db.write(async (w) => {
    const [author] = await User.findAll({ transaction: w.transaction });
    const user =
      author ??
      (await w.create(User, { email: "a@example.org", name: "Ada", passwordHash: "", admin: false, createdAt }));
    await w.create(Comment, { breakId, authorId: user.id, body, createdAt });
  });
}
const comments = () => record.context.db.select("SELECT breakId, body FROM comments ORDER BY id");

describe("a break", () => {
  it("keeps its name, and what was said of it, when a late build moves its onset back", async () => {
    await post(1, good);
    await post(5, wrong([0, 0]), undefined, undefined, { history: [2, 3, 4].map((n) => commitOf(n)) });
    const [first] = await breaks();
    await comment(first?.id ?? 0, "mine");
    await post(3, wrong([0, 0]));
    expect(await breaks()).toMatchObject([{ id: first?.id, onset: shaOf(3), state: "open" }]);
    await post(2, good);
    expect(await breaks()).toMatchObject([{ id: first?.id, onset: shaOf(3) }]);
    expect(await comments()).toEqual([{ breakId: first?.id, body: "mine" }]);
  });

  it("that was repaired stays, and the same entries wrong again are a new one", async () => {
    await post(1, good);
    await post(2, wrong([0, 0]));
    await post(3, good);
    await post(4, wrong([0, 0]));
    expect(await standing()).toMatchObject([
      { onset: shaOf(2), state: "repaired", repairedBy: shaOf(3) },
      { onset: shaOf(4), state: "open", repairedBy: null },
    ]);
  });

  it("is split by a good build that comes late, and the later part is new", async () => {
    await post(1, good);
    await post(2, wrong([0, 0]));
    await post(6, wrong([0, 0]), undefined, undefined, { history: [3, 4, 5].map((n) => commitOf(n)) });
    const [whole] = await standing();
    await post(4, good);
    expect(await standing()).toMatchObject([
      { id: whole?.id, onset: shaOf(2), state: "repaired", repairedBy: shaOf(4) },
      { onset: shaOf(6), state: "open" },
    ]);
  });

  it("of some entries is split when a late build clears only a part of them, and joined when it clears none", async () => {
    const history = { history: [2, 3].map((n) => commitOf(n)) };
    await post(1, good);
    await post(4, wrong([0, 0], [1, 1], [2, 1]), undefined, undefined, history);
    const [whole] = await standing();
    await comment(whole?.id ?? 0, "all three");
    await post(3, wrong([0, 0]));
    const split = await standing();
    expect(split.map(({ onset, entryCount }) => [onset, entryCount])).toEqual([
      [shaOf(4), 2],
      [shaOf(3), 1],
    ]);
    expect(split[0]?.id).toBe(whole?.id);
    // A second run of commit 3 takes back what the first one said: all three were wrong by then.
    await post(3, wrong([0, 0], [1, 1], [2, 1]), undefined, undefined, {
      run: { id: "again", finishedAt: "2099-01-01T00:00:00Z" },
    });
    const joined = await standing();
    expect(joined).toMatchObject([{ onset: shaOf(3), entryCount: 3, state: "open" }]);
    const gone = (await breaks()).filter(({ withdrawn }) => withdrawn === 1);
    expect(gone.map(({ supersededById }) => supersededById)).toEqual([joined[0]?.id]);
    expect(await comments()).toEqual([{ breakId: joined[0]?.id, body: "all three" }]);
  });

  it("that a second run shows to have been none is withdrawn, not erased", async () => {
    await post(1, good);
    await post(2, wrong([0, 0]));
    await post(2, good, undefined, undefined, { run: { id: "again", finishedAt: "2099-01-01T00:00:00Z" } });
    expect(await standing()).toEqual([]);
    expect(await breaks()).toMatchObject([{ withdrawn: 1, supersededById: null }]);
  });

  it("knows entries only with their block's number of columns", async () => {
    const narrow = (derivative: number[][]) =>
      blockOf({ model: "rotor.thrust", derivative, reference: numbers(3, 1, 1) });
    await post(1, good);
    await post(2, wrong([0, 1]));
    await post(3, narrow(numbers(3, 1, 1)));
    // Flat entry 1 is another partial now: its goodness repairs nothing, and its badness is a break of its own.
    expect(await standing()).toMatchObject([{ onset: shaOf(2), state: "open" }]);
    await post(4, narrow(flipped(numbers(3, 1, 1), [[1, 0]])));
    expect(await standing()).toMatchObject([
      { onset: shaOf(2), state: "open" },
      { onset: shaOf(4), state: "open", entryCount: 1 },
    ]);
    await post(5, good);
    expect(await standing()).toMatchObject([
      { onset: shaOf(2), state: "repaired", repairedBy: shaOf(5) },
      { onset: shaOf(4), state: "open" },
    ]);
  });

  it("goes on through a block that is left out, or that cannot be told", async () => {
    await post(1, good);
    await post(2, wrong([0, 0]));
    await post(3, blockOf({ model: "wake.deficit", derivative: [[1]], reference: [[1]] }));
    await post(4, { ...good, references: [] });
    await post(5, wrong([0, 0]));
    expect(await standing()).toMatchObject([{ onset: shaOf(2), state: "open" }]);
  });

  it("that a merge brings in is the same one", async () => {
    await post(1, good);
    await post(2, good);
    await post(10, wrong([0, 0]), [1], "topic");
    await post(3, wrong([0, 0]), [2, 10]);
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "open" }]);
    await post(4, good);
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "repaired", repairedBy: shaOf(4) }]);
  });

  it("speaks for its branch until that is merged, then for the default branch", async () => {
    await post(1, good);
    await post(10, wrong([0, 0]), [1], "topic");
    await post(2, good);
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "open" }]);
    await post(11, good, [10], "topic");
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "repaired", repairedBy: shaOf(11) }]);
    // Merged without the repair: the default branch has it, whatever the topic went on to do.
    await post(3, wrong([0, 0]), [2, 10]);
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "open", repairedBy: null }]);
    // What mended the topic mends the default branch once it is merged as well.
    await post(4, good, [3, 11]);
    expect(await standing()).toMatchObject([{ onset: shaOf(10), state: "repaired", repairedBy: shaOf(11) }]);
  });

  it("is told apart by lane", async () => {
    await record.post(buildOf(commitOf(1), [good], { lane: "gcc" }));
    await record.post(buildOf(commitOf(1), [good], { lane: "clang" }));
    await record.post(buildOf(commitOf(2), [wrong([0, 0])], { lane: "gcc" }));
    await record.post(buildOf(commitOf(2), [good], { lane: "clang" }));
    expect(await standing()).toHaveLength(1);
    await record.post(buildOf(commitOf(3), [wrong([0, 0])], { lane: "clang" }));
    expect((await standing()).map(({ onset }) => onset)).toEqual([shaOf(2), shaOf(3)]);
  });
});
