import type { Environment, Shard } from "./arguments.ts";
import { httpUrl } from "./httpUrl.ts";

/** What a CI system tells of itself; null where it does not. */
export interface CiFacts {
  readonly runId: string | null;
  /**
   * Tells attempts of one run apart. It is part of a whole build's run id, so that a repeated job is a new build; it is
   * left out of a shard's, so that a job that is repeated alone still meets the shards of the first attempt.
   */
  readonly attempt: string | null;
  readonly runUrl: string | null;
  readonly branch: string | null;
  readonly sha: string | null;
  readonly shard: Shard | null;
}

const NOTHING: CiFacts = { runId: null, attempt: null, runUrl: null, branch: null, sha: null, shard: null };

type Reader = (name: string) => string | null;
interface CiSystem {
  /** A variable that only this system sets. */
  readonly mark: string;
  readonly read: (get: Reader) => Partial<CiFacts>;
}

const SYSTEMS: readonly CiSystem[] = [
  {
    mark: "GITHUB_ACTIONS",
    read: (get) => ({
      runId: prefixed("github", get("GITHUB_RUN_ID")),
      attempt: get("GITHUB_RUN_ATTEMPT"),
      runUrl: joined("/", get("GITHUB_SERVER_URL"), get("GITHUB_REPOSITORY"), "actions/runs", get("GITHUB_RUN_ID")),
      // The head of a pull request; GITHUB_REF_NAME is `12/merge` there.
      branch: get("GITHUB_HEAD_REF") ?? (get("GITHUB_REF_TYPE") === "tag" ? null : get("GITHUB_REF_NAME")),
      sha: get("GITHUB_SHA"),
    }),
  },
  {
    mark: "GITLAB_CI",
    read: (get) => ({
      runId: prefixed("gitlab", get("CI_PIPELINE_ID")),
      // A job that is repeated has another id in the same pipeline.
      attempt: get("CI_JOB_ID"),
      runUrl: get("CI_PIPELINE_URL"),
      branch: get("CI_MERGE_REQUEST_SOURCE_BRANCH_NAME") ?? get("CI_COMMIT_BRANCH"),
      sha: get("CI_COMMIT_SHA"),
      shard: shardOf(get("CI_NODE_INDEX"), get("CI_NODE_TOTAL"), 1),
    }),
  },
  {
    mark: "BUILDKITE",
    read: (get) => ({
      runId: prefixed("buildkite", get("BUILDKITE_BUILD_ID")),
      attempt: get("BUILDKITE_RETRY_COUNT"),
      runUrl: get("BUILDKITE_BUILD_URL"),
      branch: get("BUILDKITE_BRANCH"),
      sha: get("BUILDKITE_COMMIT"),
      shard: shardOf(get("BUILDKITE_PARALLEL_JOB"), get("BUILDKITE_PARALLEL_JOB_COUNT"), 0),
    }),
  },
  {
    mark: "CIRCLECI",
    read: (get) => ({
      runId: prefixed("circle", get("CIRCLE_WORKFLOW_ID") ?? get("CIRCLE_BUILD_NUM")),
      runUrl: get("CIRCLE_BUILD_URL"),
      branch: get("CIRCLE_BRANCH"),
      sha: get("CIRCLE_SHA1"),
      shard: shardOf(get("CIRCLE_NODE_INDEX"), get("CIRCLE_NODE_TOTAL"), 0),
    }),
  },
  {
    mark: "TF_BUILD",
    read: (get) => ({
      runId: prefixed("azure", get("BUILD_BUILDID")),
      attempt: get("SYSTEM_JOBATTEMPT"),
      runUrl: joined(
        "",
        get("SYSTEM_COLLECTIONURI"),
        get("SYSTEM_TEAMPROJECT"),
        "/_build/results?buildId=",
        get("BUILD_BUILDID"),
      ),
      branch: withoutRefs(get("SYSTEM_PULLREQUEST_SOURCEBRANCH") ?? get("BUILD_SOURCEBRANCH")),
      sha: get("BUILD_SOURCEVERSION"),
      shard: shardOf(get("SYSTEM_JOBPOSITIONINPHASE"), get("SYSTEM_TOTALJOBSINPHASE"), 1),
    }),
  },
  {
    mark: "JENKINS_URL",
    read: (get) => ({
      runId: prefixed("jenkins", get("BUILD_TAG") ?? get("BUILD_ID")),
      runUrl: get("BUILD_URL"),
      branch: get("CHANGE_BRANCH") ?? get("BRANCH_NAME") ?? withoutRemote(get("GIT_BRANCH")),
      sha: get("GIT_COMMIT"),
    }),
  },
  {
    mark: "DRONE",
    read: (get) => ({
      runId: prefixed("drone", joined("-", get("DRONE_REPO"), get("DRONE_BUILD_NUMBER"))),
      runUrl: get("DRONE_BUILD_LINK"),
      branch: get("DRONE_SOURCE_BRANCH") ?? get("DRONE_BRANCH"),
      sha: get("DRONE_COMMIT_SHA"),
    }),
  },
  {
    mark: "TRAVIS",
    read: (get) => ({
      runId: prefixed("travis", get("TRAVIS_BUILD_ID")),
      runUrl: get("TRAVIS_BUILD_WEB_URL"),
      branch: get("TRAVIS_PULL_REQUEST_BRANCH") ?? get("TRAVIS_BRANCH"),
      sha: get("TRAVIS_COMMIT"),
    }),
  },
];

/** Reads the common CI variables. A system's value that is not well formed is left out, never passed on. */
export function ciFacts(environment: Environment): CiFacts {
  const get: Reader = (name) => environment[name]?.trim() || null;
  const system = SYSTEMS.find(({ mark }) => get(mark) !== null);
  if (!system) return NOTHING;
  const facts = { ...NOTHING, ...system.read(get) };
  return {
    ...facts,
    sha: facts.sha !== null && /^([0-9a-f]{40}|[0-9a-f]{64})$/.test(facts.sha) ? facts.sha : null,
    runUrl: facts.runUrl !== null && httpUrl(facts.runUrl) !== null ? facts.runUrl : null,
  };
}

/** All parts joined, or null where one is missing. */
function joined(separator: string, ...parts: (string | null)[]): string | null {
  return parts.includes(null) ? null : parts.join(separator);
}

const prefixed = (system: string, id: string | null): string | null => (id === null ? null : `${system}-${id}`);

function withoutRefs(ref: string | null): string | null {
  if (ref === null || ref.startsWith("refs/pull/") || ref.startsWith("refs/tags/")) return null;
  return ref.replace(/^refs\/heads\//, "");
}

const withoutRemote = (branch: string | null): string | null => branch?.replace(/^origin\//, "") ?? null;

function shardOf(index: string | null, count: string | null, first: number): Shard | null {
  if (index === null || count === null || !/^\d+$/.test(index) || !/^\d+$/.test(count)) return null;
  const shard = { index: Number(index) - first, count: Number(count) };
  return shard.count > 1 && shard.index >= 0 && shard.index < shard.count ? shard : null;
}
