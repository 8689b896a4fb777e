import { describe, expect, it } from "vitest";
import { CommitGraph } from "../../../shared/history/commitGraph.ts";
import { risingRange, risingSuspects } from "../../../shared/history/risingSuspects.ts";

const line = CommitGraph.from(
  "abcdefgh"
    .split("")
    .map((sha, at) => ({ sha, parents: at === 0 ? [] : ["abcdefgh"[at - 1] as string], committedAt: at })),
);
const context = { models: ["rotor.thrust"], sources: ["src/rotor/thrust.f90"], motion: null };
const plainFacts = (sha: string) => ({ sha, changedPaths: ["src/other.f90"], author: null, isOnset: false });
const shasOf = ({ suspects }: ReturnType<typeof risingSuspects>) => suspects.map(({ sha }) => sha);

describe("suspects of a rise", () => {
  it("are the commits after the last calm build, up to the one that told it", () => {
    const found = risingSuspects(line, risingRange(line, { calm: "c", told: "f" }), [], plainFacts, context, new Set());
    expect(shasOf(found).sort()).toEqual(["d", "e", "f"]);
    expect(found.suspects.reduce((sum, { score }) => sum + score, 0)).toBeCloseTo(1, 12);
  });

  it("come first where the error rose most, with how far", () => {
    const steps = [
      { sha: "d", decades: 0.1 },
      { sha: "e", decades: 0.9 },
      { sha: "f", decades: 0.2 },
    ];
    const found = risingSuspects(
      line,
      risingRange(line, { calm: "c", told: "f" }),
      steps,
      plainFacts,
      context,
      new Set(["d", "e", "f"]),
    );
    expect(shasOf(found)).toEqual(["e", "f", "d"]);
    expect(found.suspects[0]?.why[0]).toBe("the error rose by 0.9 decades in its build");
    expect(found.nextTest).toBeNull();
  });

  it("share a rise that lies between two builds, whose middle is the next test", () => {
    const steps = [
      { sha: "b", decades: 0.1 },
      { sha: "g", decades: 1 },
    ];
    const found = risingSuspects(
      line,
      risingRange(line, { calm: "a", told: "g" }),
      steps,
      plainFacts,
      context,
      new Set(["a", "b", "g"]),
    );
    expect(found.suspects[0]?.why[0]).toBe("the error rose by 1.0 decade over the 5 commits around it");
    expect(["d", "e"]).toContain(found.nextTest?.commit);
  });

  it("are led by a commit that changes a source, where the rises say nothing", () => {
    const facts = (sha: string) => ({
      ...plainFacts(sha),
      changedPaths: sha === "d" ? ["src/rotor/thrust.f90"] : ["a.md"],
    });
    expect(
      shasOf(risingSuspects(line, risingRange(line, { calm: "b", told: "f" }), [], facts, context, new Set()))[0],
    ).toBe("d");
  });

  it("are all ancestors where nothing before is known", () => {
    expect(
      shasOf(
        risingSuspects(line, risingRange(line, { calm: null, told: "c" }), [], plainFacts, context, new Set()),
      ).sort(),
    ).toEqual(["a", "b", "c"]);
  });
});
