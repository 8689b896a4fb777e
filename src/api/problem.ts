import type { Problem } from "../../shared/schemas/common.ts";

/** A request that did not succeed, in words a person can act on. `status` 0: the server was not reached. */
export class ApiProblem extends Error {
  readonly status: number;
  readonly title: string;
  readonly detail: string;
  readonly requestId: string | null;
  readonly errors: readonly { pointer: string; detail: string }[];
  readonly retryAfter: number | null;

  constructor(problem: Partial<Problem> & { status: number; title: string }, retryAfter: number | null = null) {
    super(problem.detail ?? problem.title);
    this.name = "ApiProblem";
    this.status = problem.status;
    this.title = problem.title;
    this.detail = problem.detail ?? "";
    this.requestId = problem.instance ?? null;
    this.errors = problem.errors ?? [];
    this.retryAfter = retryAfter;
  }

  /** What is wrong with one field of the body sent, by its name at the top level. */
  fieldError(name: string): string | undefined {
    return this.errors.find((e) => e.pointer === `#/${name}` || e.pointer.startsWith(`#/${name}/`))?.detail;
  }
}

const STATUS_TITLES: Record<number, string> = {
  401: "Please sign in",
  403: "You may not do this",
  404: "There is nothing at this address",
  409: "This conflicts with what is recorded",
  429: "Too many requests",
  503: "The server is restarting",
};

export const unreachable = () =>
  new ApiProblem({
    status: 0,
    title: "The server did not answer",
    detail: "Check the network, or whether the server is running, and try again.",
  });

/** Reads a failed answer; a body that is no problem document still becomes a problem with the status told. */
export async function problemFrom(response: Response): Promise<ApiProblem> {
  const seconds = Number(response.headers.get("Retry-After") ?? Number.NaN);
  const retryAfter = Number.isFinite(seconds) ? seconds : null;
  const title = STATUS_TITLES[response.status] ?? `The server answered ${response.status}`;
  if (!(response.headers.get("Content-Type") ?? "").includes("json")) {
    return new ApiProblem({ status: response.status, title }, retryAfter);
  }
  const body = (await response.json().catch(() => ({}))) as Partial<Problem>;
  return new ApiProblem({ ...body, status: response.status, title: body.title ?? title }, retryAfter);
}

/** Any thrown value as a problem, for the one component that shows them. */
export function asProblem(error: unknown): ApiProblem {
  if (error instanceof ApiProblem) return error;
  return new ApiProblem({
    status: 0,
    title: "This page met an error of its own",
    detail: error instanceof Error ? error.message : String(error),
  });
}
