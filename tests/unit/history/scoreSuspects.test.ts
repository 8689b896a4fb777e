import { describe, expect, it } from "vitest";
import { looksLikeDerivative } from "../../../shared/history/looksLikeDerivative.ts";
import { pathWords } from "../../../shared/history/pathWords.ts";
import { scoreSuspects } from "../../../shared/history/scoreSuspects.ts";
import type { ScoreContext, SuspectFacts } from "../../../shared/history/types.ts";
import { mulberry32, shuffled } from "../../support/random.ts";

const context: ScoreContext = {
  models: ["rotor.thrust"],
  sources: ["src/rotor/thrust.f90", "./src/rotor/thrust_grad.f90"],
  motion: null,
};

function suspect(sha: string, changedPaths: string[] | null, more: Partial<SuspectFacts> = {}): SuspectFacts {
  return { sha, changedPaths, author: null, isOnset: false, containedInGood: false, ...more };
}

/** Reasons for a single suspect. */
function why(paths: string[] | null, more: Partial<SuspectFacts> = {}, given: Partial<ScoreContext> = {}) {
  return scoreSuspects([suspect("s", paths, more)], { ...context, ...given })[0]!.why;
}

/** Shas, most likely first. */
function order(facts: SuspectFacts[], given: Partial<ScoreContext> = {}) {
  return scoreSuspects(facts, { ...context, ...given }).map(({ sha }) => sha);
}

describe("scores", () => {
  const facts = [
    suspect("a", ["src/rotor/thrust_grad.f90"]),
    suspect("b", ["docs/guide.md"]),
    suspect("c", null, { isOnset: true }),
    suspect("d", ["src/mooring/line.f90"], { containedInGood: true }),
  ];

  it("are in 0..1, sum to 1 and fall", () => {
    const scores = scoreSuspects(facts, context).map(({ score }) => score);
    expect(scores.reduce((sum, score) => sum + score, 0)).toBeCloseTo(1, 12);
    expect([...scores].sort((x, y) => y - x)).toEqual(scores);
    expect(scores.every((score) => score > 0 && score < 1)).toBe(true);
  });

  it("do not depend on the order of the suspects; equals come by sha", () => {
    const expected = scoreSuspects(facts, context);
    for (let seed = 0; seed < 10; seed++) {
      expect(scoreSuspects(shuffled(mulberry32(seed), facts), context)).toEqual(expected);
    }
    expect(order([suspect("z", null), suspect("y", null)])).toEqual(["y", "z"]);
  });

  it("of one suspect is 1, of none nothing", () => {
    expect(scoreSuspects([suspect("a", [])], context)[0]!.score).toBe(1);
    expect(scoreSuspects([], context)).toEqual([]);
  });
});

describe("changed paths", () => {
  it("put a source before its namesake, its folder, the model's name, the recipe and the rest", () => {
    const paths = {
      source: "src/rotor/thrust.f90",
      stem: "lib/thrust_adj.f90",
      folder: "src/rotor/blade.f90",
      name: "checks/rotor/run_thrust_cases.py",
      part: "src/hub/rotor_inertia.f90",
      recipe: "CMakeLists.txt",
      rest: "src/mooring/line.f90",
      prose: "README.md",
    };
    const facts = Object.entries(paths).map(([sha, path]) => suspect(sha, [path]));
    expect(order(facts)).toEqual(Object.keys(paths));
  });

  it.each([
    ["src/rotor/thrust.f90", "changes src/rotor/thrust.f90, a source of rotor.thrust"],
    ["src\\rotor\\thrust.f90", "changes src/rotor/thrust.f90, a source of rotor.thrust"],
    ["lib/thrust_adj.f90", "changes lib/thrust_adj.f90, named like src/rotor/thrust.f90"],
    ["src/rotor/blade.f90", "changes src/rotor/blade.f90, in the folder of src/rotor/thrust.f90"],
    ["checks/rotorThrust.py", "changes checks/rotorThrust.py, named after rotor.thrust"],
    ["src/rotorhub/rotor.py", "changes src/rotorhub/rotor.py, whose name has a word of rotor.thrust"],
    ["CMakeLists.txt", "changes CMakeLists.txt, which every model is built with"],
    ["src/mooring/line.f90", "changes no file connected with rotor.thrust"],
    ["README.md", "changes one file, all of them text or pictures"],
  ])("%s: %s", (path, reason) => {
    expect(why([path])[0]).toBe(reason);
  });

  it("count a file under a source that is a folder", () => {
    expect(why(["src/rotor/deep/x.f90"], {}, { sources: ["src/rotor/"] })[0]).toBe(
      "changes src/rotor/deep/x.f90, a source of rotor.thrust",
    );
  });

  it("tell the second clue too, and the size of a large change", () => {
    const many = Array.from({ length: 20 }, (_, at) => `src/other/file${at}.f90`);
    const reasons = why([...many, "src/rotor/blade.f90", "src/rotor/thrust.f90"]);
    expect(reasons).toContain("changes src/rotor/thrust.f90, a source of rotor.thrust");
    expect(reasons).toContain("changes src/rotor/blade.f90, in the folder of src/rotor/thrust.f90");
    expect(reasons).toContain("changes 22 files");
    expect(order([suspect("large", many), suspect("small", ["src/other/file1.f90"])])).toEqual(["large", "small"]);
  });

  it("say so where nothing is known, or nothing changed", () => {
    expect(why(null)).toEqual(["what it changes is not known"]);
    expect(why([])).toEqual(["changes no file"]);
    expect(why(["x.f90"], {}, { models: [], sources: [] })[0]).toBe("changes no file connected with the model");
  });
});

describe("motion", () => {
  const both = [suspect("derivative", ["src/rotor/thrust_grad.f90"]), suspect("model", ["src/rotor/thrust.f90"])];

  it("looks for derivative code where the derivative alone moved", () => {
    expect(order(both, { motion: "derivative-only" })).toEqual(["derivative", "model"]);
    expect(why(["src/rotor/thrust_grad.f90"], {}, { motion: "derivative-only" })).toContain(
      "only the derivative moved, and src/rotor/thrust_grad.f90 looks like derivative code",
    );
  });

  it("looks for model code where the model alone moved", () => {
    expect(order(both, { motion: "model-only" })).toEqual(["model", "derivative"]);
    expect(why(["src/rotor/thrust.f90"], {}, { motion: "model-only" })).toContain(
      "only the model moved, and src/rotor/thrust.f90 looks like model code",
    );
    expect(why(["src/rotor/thrust_grad.f90"], {}, { motion: "model-only" })).toContain(
      "only the model moved, and this changes derivative code alone",
    );
  });

  it("says nothing of both where both moved or neither", () => {
    for (const motion of ["together", "apart", "still"] as const) {
      expect(why(["src/rotor/thrust_grad.f90"], {}, { motion })).toHaveLength(1);
    }
  });
});

describe("other facts", () => {
  it("raise the onset and the owner, and lower what a good build holds", () => {
    const plain = suspect("m", ["src/other.f90"]);
    expect(order([plain, { ...plain, sha: "z", isOnset: true }])).toEqual(["z", "m"]);
    expect(order([plain, { ...plain, sha: "a", containedInGood: true }])).toEqual(["m", "a"]);
    expect(order([plain, { ...plain, sha: "z", author: "Ada" }], { owners: ["Ada"] })).toEqual(["z", "m"]);
  });

  it("are told in words, most weighty first", () => {
    const reasons = why(
      ["src/rotor/thrust.f90"],
      { isOnset: true, author: "Ada", containedInGood: true },
      { owners: ["Ada"] },
    );
    expect(reasons).toEqual([
      "changes src/rotor/thrust.f90, a source of rotor.thrust",
      "a good build on another line contains it",
      "the first build that was bad is of this commit",
      "by Ada, who owns rotor.thrust",
    ]);
  });
});

describe("words of paths", () => {
  it("are split at separators and capitals", () => {
    expect(pathWords("src/rotorThrust_jac.f90")).toEqual(["src", "rotor", "thrust", "jac", "f90"]);
    expect(pathWords("HTTPServer")).toEqual(["http", "server"]);
    expect(pathWords("//")).toEqual([]);
  });

  it.each([
    "src/thrust_grad.f90",
    "adjoint/thrust.f90",
    "computeJacobian.ts",
    "thrust_b.f90",
    "thrust_dv.c",
    "tangent.py",
  ])("%s looks like derivative code", (path) => expect(looksLikeDerivative(path)).toBe(true));
  it.each(["src/thrust.f90", "upgrade.ts", "d.ts", "gradually.md", "b.f90", "folder_b/model.f90"])(
    "%s does not",
    (path) => expect(looksLikeDerivative(path)).toBe(false),
  );
});
