import { gzipSync } from "node:zlib";
import type { BreakDetail } from "../../shared/schemas/break.ts";
import type { BuildRow, PostedBuild } from "../../shared/schemas/build.ts";
import type { Gate } from "../../shared/schemas/gate.ts";
import type { ReadyDocument } from "./document.ts";
import { notPosted } from "./exit.ts";
import { refusal } from "./explain.ts";
import { send } from "./http.ts";
import type { HttpAnswer, Retrying } from "./http.ts";
import { VERSION } from "./version.ts";

/** Where and as whom to post. */
export interface Target {
  readonly server: string;
  readonly project: string;
  readonly token: string;
}

/** Smaller bodies travel in a few packets either way. */
const GZIP_FROM_BYTES = 8 * 1024;

const address = ({ server, project }: Target, path: string): string =>
  `${server}/api/v1/projects/${encodeURIComponent(project)}/${path}`;

const headers = (target: Target): Record<string, string> => ({
  Authorization: `Bearer ${target.token}`,
  Accept: "application/json, application/problem+json",
  "User-Agent": `clinograph-report/${VERSION}`,
});

/** Posts a document; a lost answer is asked for again with the same bytes, which the server knows as a retry. */
export async function postDocument(
  target: Target,
  document: ReadyDocument,
  options: { readonly dryRun: boolean },
  retrying: Retrying,
): Promise<PostedBuild> {
  const plain = Buffer.from(JSON.stringify(document));
  const packed = plain.length > GZIP_FROM_BYTES;
  const answer = await send(
    {
      method: "POST",
      url: address(target, options.dryRun ? "builds?dryRun=1" : "builds"),
      headers: {
        ...headers(target),
        "Content-Type": "application/json",
        ...(packed ? { "Content-Encoding": "gzip" } : {}),
      },
      body: packed ? gzipSync(plain) : plain,
    },
    retrying,
  );
  if (answer.status < 200 || answer.status > 299) throw refusal(answer);
  return postedIn(answer);
}

/** A page of a proxy or of another server also answers 200: that must not pass for a verdict. */
function postedIn(answer: HttpAnswer): PostedBuild {
  const body = answer.body as Partial<PostedBuild> | null;
  if (!body?.build?.id || !body.summary || !body.gate?.decision || !Array.isArray(body.breaks)) {
    throw notPosted(`What answered ${answer.status} is not Clinograph: check --server.`);
  }
  return answer.body as PostedBuild;
}

/** Completes a build without its missing shards. */
export async function closeBuild(target: Target, buildId: string, retrying: Retrying): Promise<PostedBuild> {
  const url = address(target, `builds/${encodeURIComponent(buildId)}/close`);
  const answer = await send({ method: "POST", url, headers: headers(target) }, retrying);
  if (answer.status !== 200) throw refusal(answer);
  return postedIn(answer);
}

async function get<T>(target: Target, path: string, retrying: Retrying): Promise<T> {
  const answer = await send({ method: "GET", url: address(target, path), headers: headers(target) }, retrying);
  if (answer.status !== 200) throw refusal(answer);
  return answer.body as T;
}

export function readGate(target: Target, commit: string, lane: string, retrying: Retrying): Promise<Gate> {
  return get<Gate>(target, `gate?${new URLSearchParams({ commit, lane })}`, retrying);
}

export function readBuild(target: Target, buildId: string, retrying: Retrying): Promise<BuildRow> {
  return get<BuildRow>(target, `builds/${encodeURIComponent(buildId)}`, retrying);
}

/** The break as a posting's answer tells it. */
export async function readBreak(
  target: Target,
  id: string,
  retrying: Retrying,
): Promise<PostedBuild["breaks"][number]> {
  const { url, state, onset } = await get<BreakDetail>(target, `breaks/${encodeURIComponent(id)}`, retrying);
  return { id, url, state, onset: onset.commit };
}

/** The build of a commit, lane and run that is still receiving; null where there is none. */
export async function findReceiving(
  target: Target,
  build: { readonly commit: string; readonly lane: string; readonly runId: string },
  retrying: Retrying,
): Promise<BuildRow | null> {
  const query = new URLSearchParams({ commit: build.commit, lane: build.lane, limit: "500" });
  const { items } = await get<{ items: BuildRow[] }>(target, `builds?${query}`, retrying);
  return items.find((item) => item.state === "receiving" && item.run.id === build.runId) ?? null;
}
