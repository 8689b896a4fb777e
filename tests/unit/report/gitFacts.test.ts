import { execFileSync } from "node:child_process";
import { rmSync } from "node:fs";
import { join } from "node:path";
import { afterEach, describe, expect, it } from "vitest";
import { gitFacts } from "../../../scripts/report/gitFacts.ts";
import { makeFolder, makeRepository } from "./support/repository.ts";
import type { Repository } from "./support/repository.ts";

const made: { dispose(): void }[] = [];
afterEach(() => made.splice(0).forEach((one) => one.dispose()));

function repository(): Repository {
  const one = makeRepository();
  made.push(one);
  return one;
}

function emptyFolder(): string {
  const folder = makeFolder();
  made.push({ dispose: () => rmSync(folder, { recursive: true, force: true }) });
  return folder;
}

describe("what git tells", { timeout: 60_000 }, () => {
  it("is nothing outside a repository, without a commit, and for a commit that is not there", () => {
    expect(gitFacts(emptyFolder(), "HEAD", 10)).toBe(null);
    const repo = repository();
    expect(gitFacts(repo.folder, "HEAD", 10)).toBe(null);
    repo.commit("First", "a.f90");
    expect(gitFacts(repo.folder, "f".repeat(40), 10)).toBe(null);
    expect(gitFacts(repo.folder, "--output=stolen", 10)).toBe(null);
  });

  it("tells a commit with everything that a posting can say of it", () => {
    const repo = repository();
    const first = repo.commit("First", "src/rotor thrust.f90");
    const second = repo.commit('Say "wake"; mind ümlauts', "src/wäke.f90");
    expect(gitFacts(repo.folder, "HEAD", 10)).toEqual({
      commit: {
        sha: second,
        parents: [first],
        subject: 'Say "wake"; mind ümlauts',
        author: { name: "Ada Minster", email: "ada@example.org" },
        committedAt: "2026-03-01T09:02:00+00:00",
        changedPaths: ["src/wäke.f90"],
      },
      history: [expect.objectContaining({ sha: first, parents: [], changedPaths: ["src/rotor thrust.f90"] })],
      branch: "main",
      shallow: false,
    });
  });

  it("tells merges with what they changed against their first parent, and the commits of the branch", () => {
    const repo = repository();
    repo.commit("First", "a.f90");
    repo.git("checkout", "-q", "-b", "wake");
    const onBranch = repo.commit("On the branch", "wake.f90");
    repo.git("checkout", "-q", "main");
    const onMain = repo.commit("On main", "b.f90");
    repo.git("merge", "-q", "--no-ff", "-m", "Merge wake", "wake");
    const { commit, history } = gitFacts(repo.folder, "HEAD", 10)!;
    expect(commit).toMatchObject({ parents: [onMain, onBranch], changedPaths: ["wake.f90"] });
    expect(history.map(({ subject }) => subject)).toEqual(expect.arrayContaining(["On the branch", "On main"]));
    expect(history).toHaveLength(3);
  });

  it("stops at the history that was asked for", () => {
    const repo = repository();
    for (const n of [1, 2, 3, 4]) repo.commit(`Commit ${n}`, "a.f90", String(n));
    expect(gitFacts(repo.folder, "HEAD", 2)!.history.map(({ subject }) => subject)).toEqual(["Commit 3", "Commit 2"]);
    expect(gitFacts(repo.folder, "HEAD", 0)!.history).toEqual([]);
  });

  it("knows no branch with a detached head, nor for another commit than the tip", () => {
    const repo = repository();
    const first = repo.commit("First", "a.f90");
    repo.commit("Second", "a.f90");
    expect(gitFacts(repo.folder, first, 10)).toMatchObject({ branch: null, commit: { sha: first }, history: [] });
    repo.git("checkout", "-q", "--detach", first);
    expect(gitFacts(repo.folder, "HEAD", 10)).toMatchObject({ branch: null, commit: { sha: first } });
  });

  it("does not take the edge of a shallow clone for the beginning of the history", () => {
    const repo = repository();
    repo.commit("First", "a.f90");
    const second = repo.commit("Second", "b.f90");
    const third = repo.commit("Third", "c.f90");
    const clone = join(emptyFolder(), "clone");
    execFileSync("git", ["clone", "-q", "--depth", "1", `file://${repo.folder}`, clone], { stdio: "ignore" });
    const { commit, history, shallow } = gitFacts(clone, "HEAD", 10)!;
    expect(shallow).toBe(true);
    expect(history).toEqual([]);
    expect(commit).toMatchObject({ sha: third, parents: [second] });
    expect(commit).not.toHaveProperty("changedPaths");
  });

  it("shortens a long subject to what the server takes", () => {
    const repo = repository();
    repo.commit("x".repeat(900), "a.f90");
    expect(gitFacts(repo.folder, "HEAD", 0)!.commit.subject).toHaveLength(500);
  });
});
