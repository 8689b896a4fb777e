import { UniqueConstraintError } from "sequelize";
import { ZodError } from "zod";
import { RejectedPosting } from "../ingest/rejection.ts";
import {
  Conflict,
  Invalid,
  MalformedRequest,
  NotFound,
  PayloadTooLarge,
  Problem,
  UnsupportedMedia,
} from "./problem.ts";
import { invalidFrom } from "./validate.ts";

/** Errors of body-parser, express and node carry a class-like `type` or a status. */
interface HttpError {
  readonly type?: string;
  readonly status?: number;
  readonly limit?: number;
}

/** Any thrown value as a problem, told by class and never by message; null for what only a mistake of ours explains. */
export function problemFrom(error: unknown): Problem | null {
  if (error instanceof Problem) return error;
  if (error instanceof RejectedPosting) return fromRejection(error);
  if (error instanceof ZodError) return invalidFrom(error, []);
  if (error instanceof UniqueConstraintError) return new Conflict("Something of this name exists already.");
  if (error instanceof URIError) return new NotFound();
  if (error instanceof Error) return fromHttpError(error as HttpError);
  return null;
}

function fromRejection({ rejection }: RejectedPosting): Problem {
  switch (rejection.kind) {
    case "malformed-json":
    case "malformed-encoding":
      return new MalformedRequest(rejection.detail);
    case "too-large":
      return new PayloadTooLarge(rejection.detail);
    case "invalid":
      return new Invalid(rejection.errors, rejection.more);
  }
}

function fromHttpError(error: HttpError): Problem | null {
  switch (error.type) {
    case "entity.too.large":
      return new PayloadTooLarge(`The body is larger than ${error.limit ?? "the limit of"} bytes.`);
    case "encoding.unsupported":
      return new UnsupportedMedia("The Content-Encoding is not one that this address takes.");
    case "request.size.invalid":
    case "request.aborted":
      return new MalformedRequest("The body is not as long as Content-Length says.");
  }
  // Inflating failed on the way, or the path is not valid percent-encoding.
  return error.status === 400 ? new MalformedRequest("The request cannot be read.") : null;
}
