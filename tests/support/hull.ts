import type { BuildDocument } from "../../shared/schemas/build.ts";
import type { CommitDocument } from "../../shared/schemas/commit.ts";
import type { SeededProject, TestServer } from "./server.ts";

type PostedBlock = BuildDocument["blocks"][number];

/** Commit number `n` of the story: `n` spelled out to 40 hex digits. */
export const shaOf = (n: number): string => n.toString(16).padStart(40, "0");

const DAY = 24 * 60 * 60 * 1000;
const LONG_AGO = Date.UTC(2026, 0, 1, 9);

export function commitOf(
  n: number,
  parents: readonly number[] = n > 1 ? [n - 1] : [],
  branch = "main",
): CommitDocument {
  return {
    sha: shaOf(n),
    parents: parents.map(shaOf),
    branch,
    subject: `Commit ${n}`,
    author: { name: n % 2 === 0 ? "Ada" : "Brook" },
    committedAt: new Date(LONG_AGO + n * DAY).toISOString(),
    changedPaths: [n === 3 ? "src/rotor/thrust.f90" : `docs/page${n}.md`],
  };
}

/** Rows of numbers that are never round, so that any mix-up shows. */
export function numbers(rows: number, columns: number, seed: number): number[][] {
  return Array.from({ length: rows }, (_, r) =>
    Array.from({ length: columns }, (_, c) => Math.sin(seed + 3 * r + 7 * c) + 2),
  );
}

export interface BlockWish {
  readonly model: string;
  readonly derivative: readonly (readonly (number | "NaN")[])[];
  readonly reference: readonly (readonly number[])[];
}

export function blockOf({ model, derivative, reference }: BlockWish): PostedBlock {
  return {
    model,
    output: { name: "f", size: reference.length, unit: "N" },
    input: { name: "x", size: reference[0]?.length ?? 0 },
    derivative: { method: "analytic", values: derivative.map((row) => [...row]) },
    references: [{ method: "complex-step", step: 1e-20, values: reference.map((row) => [...row]) }],
    sources: [`src/${model.replaceAll(".", "/")}.f90`],
  };
}

/** The same numbers with some entries' signs turned. */
export function flipped(values: readonly (readonly number[])[], entries: readonly (readonly [number, number])[]) {
  return values.map((row, r) => row.map((value, c) => (entries.some(([i, j]) => i === r && j === c) ? -value : value)));
}

export interface BuildWish {
  readonly lane?: string;
  readonly run?: Partial<BuildDocument["run"]>;
  readonly shard?: BuildDocument["shard"];
  readonly history?: readonly CommitDocument[];
}

export function buildOf(commit: CommitDocument, blocks: PostedBlock[], wish: BuildWish = {}): BuildDocument {
  return {
    format: "clinograph.build/1",
    commit,
    history: [...(wish.history ?? [])],
    lane: wish.lane ?? "default",
    run: { id: `run of ${commit.sha}`, ...wish.run },
    ...(wish.shard ? { shard: wish.shard } : {}),
    blocks,
  };
}

export async function post(server: TestServer, project: SeededProject, document: BuildDocument) {
  const response = await server
    .guest()
    .post(`/api/v1/projects/${project.slug}/builds`)
    .set("Authorization", `Bearer ${project.tokens.both}`)
    .send(document);
  if (response.status !== 201) throw new Error(JSON.stringify(response.body));
  return response.body as { build: { id: string }; breaks: { id: string }[] };
}

export const THRUST = numbers(3, 2, 1);
export const TENSION = numbers(2, 2, 5);
export const BROKEN: readonly (readonly [number, number])[] = [
  [0, 1],
  [1, 0],
  [2, 1],
];

/**
 * Commits on a line. 1 is good; 2 and 3 were never built; at 4 three partials of rotor.thrust have the wrong sign, and
 * stay so; at 5 one of mooring.tension is NaN, which 7 repairs; 6 was never built; 8 was told of alone.
 */
export async function postStory(
  server: TestServer,
  project: SeededProject,
  lane = "default",
): Promise<Record<1 | 4 | 5 | 7, string>> {
  const wrong = flipped(THRUST, BROKEN);
  const holed = TENSION.map((row, r) => row.map((value, c) => (r === 1 && c === 1 ? ("NaN" as const) : value)));
  const build = async (n: number, thrust: BlockWish["derivative"], tension: BlockWish["derivative"]) => {
    const blocks = [
      blockOf({ model: "rotor.thrust", derivative: thrust, reference: THRUST }),
      blockOf({ model: "mooring.tension", derivative: tension, reference: TENSION }),
    ];
    return (
      await post(server, project, buildOf(commitOf(n), blocks, { lane, history: [2, 3, 6].map((m) => commitOf(m)) }))
    ).build.id;
  };
  const ids = {
    1: await build(1, THRUST, TENSION),
    4: await build(4, wrong, TENSION),
    5: await build(5, wrong, holed),
    7: await build(7, wrong, TENSION),
  };
  await server
    .guest()
    .post(`/api/v1/projects/${project.slug}/commits`)
    .set("Authorization", `Bearer ${project.tokens.both}`)
    .send({ commits: [commitOf(8)] });
  return ids;
}
