import { notPosted, wrongUse } from "./exit.ts";
import type { ReportError } from "./exit.ts";
import type { HttpAnswer } from "./http.ts";

interface ProblemBody {
  readonly title?: unknown;
  readonly detail?: unknown;
  readonly errors?: readonly { readonly pointer?: unknown; readonly detail?: unknown }[];
  readonly moreErrors?: unknown;
}

const MOST_LISTED = 12;

const ADVICE: Readonly<Record<number, string>> = {
  401: "The token is not known, has expired or was revoked: check CLINOGRAPH_TOKEN.",
  403: "The token may not do this: posting needs the scope post, waiting for a verdict the scope read.",
  404: "There is no such project for this token: check --project, and that the token is the project's own.",
  409: "Another document was posted under the same run id (or the record says otherwise of a commit). A new run needs another run id; several documents of one build are shards: see --shard.",
  413: "The server's limit is an operator's setting; a large build can be posted in shards, see --shard.",
};

/** An answer that is not a success, in words, with the exit code that goes with it. */
export function refusal(answer: HttpAnswer): ReportError {
  const { status } = answer;
  if (status >= 300 && status < 400) {
    const target = answer.headers.get("location") ?? "somewhere else";
    return wrongUse(`The server's address leads on to ${target}: give that as --server.`);
  }
  const lines = [`The server answers ${status}${told(answer.body)}`, ...listed(answer.body)];
  const advice = ADVICE[status];
  if (advice) lines.push(advice);
  const message = lines.join("\n");
  return status >= 400 && status < 500 ? wrongUse(message) : notPosted(message);
}

const problemOf = (body: unknown): ProblemBody => (typeof body === "object" && body !== null ? body : {});

function told(body: unknown): string {
  const { title, detail } = problemOf(body);
  const words = [title, detail].filter((part) => typeof part === "string" && part !== "");
  return words.length === 0 ? "." : `: ${words.join(". ").replace(/\.\./g, ".")}`;
}

function listed(body: unknown): string[] {
  const { errors, moreErrors } = problemOf(body);
  if (!Array.isArray(errors)) return [];
  const lines = errors.slice(0, MOST_LISTED).map(({ pointer, detail }) => `  ${String(pointer)}: ${String(detail)}`);
  const left = errors.length - lines.length + (typeof moreErrors === "number" ? moreErrors : 0);
  return left > 0 ? [...lines, `  and ${left} more`] : lines;
}
