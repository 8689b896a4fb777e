import type { ErrorRequestHandler, Response } from "express";
import type { Logger } from "../logger.ts";
import { Problem } from "./problem.ts";
import { PROBLEMS } from "./problemCatalogue.ts";
import { problemFrom } from "./problemFrom.ts";

/** The one place where errors become answers (RFC 9457). A mistake of ours is logged in full and told in general. */
export function problemHandler(logger: Logger): ErrorRequestHandler {
  return (error: unknown, request, response, next) => {
    const known = problemFrom(error);
    if (known === null) logger.error({ err: error, requestId: request.id }, "unexpected error");
    if (response.headersSent) {
      next(error);
      return;
    }
    const requestId = String(request.id);
    sendProblem(
      response,
      known ?? new Problem("internal", `Tell the operator the request id ${requestId}.`),
      requestId,
    );
  };
}

function sendProblem(response: Response, problem: Problem, requestId: string): void {
  const { status, title } = PROBLEMS[problem.slug];
  const body = {
    type: `/problems/${problem.slug}`,
    title,
    status,
    detail: problem.message,
    instance: requestId,
    ...problem.members,
  };
  response
    .status(status)
    .set({ "Cache-Control": "no-store", ...problem.headers })
    .type("application/problem+json")
    .send(JSON.stringify(body));
}
