import { randomUUID } from "node:crypto";
import type { IncomingMessage, ServerResponse } from "node:http";
import { pinoHttp } from "pino-http";
import type { Logger } from "../logger.ts";

/** Ids that others gave are kept where they cannot disturb a log line. */
const SANE_ID = /^[\w.-]{8,64}$/;
const QUIET = /^\/(livez|healthz|readyz|metrics)$/;

function requestId(request: IncomingMessage, response: ServerResponse): string {
  const given = request.headers["x-request-id"];
  const id = typeof given === "string" && SANE_ID.test(given) ? given : randomUUID();
  response.setHeader("X-Request-Id", id);
  return id;
}

/** One line a request, with the id that the answer repeats; probes are not logged. */
export function requestLog(logger: Logger) {
  return pinoHttp({
    logger,
    genReqId: requestId,
    quietReqLogger: true,
    customAttributeKeys: { reqId: "requestId" },
    autoLogging: { ignore: (request) => QUIET.test(request.url ?? "") },
    customLogLevel: (_request, response) => (response.statusCode >= 500 ? "warn" : "info"),
    // The problem handler tells errors in full; an error made up from the status says nothing more.
    customErrorObject: (_request, _response, _error, { err: _err, ...line }: Record<string, unknown>) => line,
    serializers: {
      req: (request: { method: string; url: string }) => ({ method: request.method, url: request.url }),
      res: (response: { statusCode: number }) => ({ status: response.statusCode }),
    },
  });
}
