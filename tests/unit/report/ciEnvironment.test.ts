import { describe, expect, it } from "vitest";
import { ciFacts } from "../../../scripts/report/ciEnvironment.ts";

const sha = "0123456789abcdef0123456789abcdef01234567";

describe("what CI systems tell", () => {
  it("is nothing outside of them", () => {
    expect(ciFacts({ PATH: "/bin", CI: "true" })).toEqual({
      runId: null,
      attempt: null,
      runUrl: null,
      branch: null,
      sha: null,
      shard: null,
    });
  });

  it("takes the head of a pull request for the branch, and no tag for one", () => {
    const environment = {
      GITHUB_ACTIONS: "true",
      GITHUB_RUN_ID: "77",
      GITHUB_RUN_ATTEMPT: "2",
      GITHUB_SERVER_URL: "https://forge.example",
      GITHUB_REPOSITORY: "team/hull",
      GITHUB_REF_NAME: "12/merge",
      GITHUB_REF_TYPE: "branch",
      GITHUB_SHA: sha,
    };
    expect(ciFacts({ ...environment, GITHUB_HEAD_REF: "wake" })).toEqual({
      runId: "github-77",
      attempt: "2",
      runUrl: "https://forge.example/team/hull/actions/runs/77",
      branch: "wake",
      sha,
      shard: null,
    });
    expect(ciFacts({ ...environment, GITHUB_HEAD_REF: "", GITHUB_REF_TYPE: "tag" }).branch).toBe(null);
  });

  it.each([
    [
      "counts from 1",
      { GITLAB_CI: "true", CI_PIPELINE_ID: "5", CI_NODE_INDEX: "2", CI_NODE_TOTAL: "3" },
      { index: 1, count: 3 },
    ],
    [
      "counts from 0",
      { BUILDKITE: "true", BUILDKITE_PARALLEL_JOB: "2", BUILDKITE_PARALLEL_JOB_COUNT: "3" },
      { index: 2, count: 3 },
    ],
    ["one of one is no shard", { CIRCLECI: "true", CIRCLE_NODE_INDEX: "0", CIRCLE_NODE_TOTAL: "1" }, null],
    ["what is no number is no shard", { GITLAB_CI: "true", CI_NODE_INDEX: "x", CI_NODE_TOTAL: "3" }, null],
    ["out of range is no shard", { GITLAB_CI: "true", CI_NODE_INDEX: "4", CI_NODE_TOTAL: "3" }, null],
  ])("reads parallel jobs: %s", (_, environment, shard) => {
    expect(ciFacts(environment).shard).toEqual(shard);
  });

  it("tells a repeated job from its first attempt", () => {
    const environment = { GITLAB_CI: "true", CI_PIPELINE_ID: "5", CI_JOB_ID: "51" };
    expect(ciFacts(environment)).toMatchObject({ runId: "gitlab-5", attempt: "51" });
  });

  it("reads the others", () => {
    expect(ciFacts({ TF_BUILD: "True", BUILD_BUILDID: "9", BUILD_SOURCEBRANCH: "refs/heads/wake" })).toMatchObject({
      runId: "azure-9",
      branch: "wake",
    });
    expect(ciFacts({ TF_BUILD: "True", BUILD_SOURCEBRANCH: "refs/pull/3/merge" }).branch).toBe(null);
    expect(ciFacts({ JENKINS_URL: "http://j/", BUILD_TAG: "hull-3", GIT_BRANCH: "origin/main" })).toMatchObject({
      runId: "jenkins-hull-3",
      branch: "main",
    });
    expect(ciFacts({ CIRCLECI: "true", CIRCLE_WORKFLOW_ID: "w", CIRCLE_BRANCH: "main" }).runId).toBe("circle-w");
    expect(ciFacts({ DRONE: "true", DRONE_REPO: "a/b", DRONE_BUILD_NUMBER: "4" }).runId).toBe("drone-a/b-4");
    expect(ciFacts({ TRAVIS: "true", TRAVIS_BUILD_ID: "8", TRAVIS_BRANCH: "main" }).runId).toBe("travis-8");
  });

  it("passes nothing on that is not well formed", () => {
    expect(ciFacts({ GITLAB_CI: "1", CI_COMMIT_SHA: "abc", CI_PIPELINE_URL: "javascript:1" })).toMatchObject({
      sha: null,
      runUrl: null,
    });
  });
});
