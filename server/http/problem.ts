import type { ListedError } from "../ingest/complaints.ts";
import { PROBLEMS } from "./problemCatalogue.ts";
import type { ProblemSlug } from "./problemCatalogue.ts";

/** What an answer other than success says. Thrown anywhere in a handler, told by the one problem handler. */
export class Problem extends Error {
  readonly slug: ProblemSlug;
  readonly status: number;
  readonly headers: Readonly<Record<string, string>>;
  readonly members: Readonly<Record<string, unknown>>;

  constructor(
    slug: ProblemSlug,
    detail: string,
    extra: { headers?: Record<string, string>; members?: Record<string, unknown> } = {},
  ) {
    super(detail);
    this.slug = slug;
    this.status = PROBLEMS[slug].status;
    this.headers = extra.headers ?? {};
    this.members = extra.members ?? {};
  }
}

export class MalformedRequest extends Problem {
  constructor(detail: string) {
    super("malformed-request", detail);
  }
}

export class Unauthorized extends Problem {
  constructor(detail: string, error?: "invalid_token") {
    const challenge = `Bearer realm="clinograph"${error ? `, error="${error}"` : ""}`;
    super("not-signed-in", detail, { headers: { "WWW-Authenticate": challenge } });
  }
}

export class SignInFailed extends Problem {
  constructor() {
    super("sign-in-failed", "The e-mail address or the password is not right.", {
      headers: { "WWW-Authenticate": 'Bearer realm="clinograph"' },
    });
  }
}

export class Forbidden extends Problem {
  constructor(detail: string, slug: "not-allowed" | "csrf-token" = "not-allowed") {
    super(slug, detail);
  }
}

export class NotFound extends Problem {
  constructor(detail = "It does not exist, or you may not know of it.") {
    super("not-found", detail);
  }
}

export class MethodNotAllowed extends Problem {
  constructor(method: string, allowed: readonly string[]) {
    super("method-not-allowed", `This address does not take ${method}.`, { headers: { Allow: allowed.join(", ") } });
  }
}

export class Conflict extends Problem {
  constructor(detail: string) {
    super("conflict", detail);
  }
}

export class PayloadTooLarge extends Problem {
  constructor(detail: string) {
    super("too-large", detail);
  }
}

export class UnsupportedMedia extends Problem {
  constructor(detail: string, headers: Record<string, string> = {}) {
    super("unsupported-media", detail, { headers });
  }
}

export class Invalid extends Problem {
  constructor(errors: readonly ListedError[], more = 0) {
    const count = errors.length + more;
    super("invalid", count === 1 ? (errors[0]?.detail ?? "") : `${count} places are not valid.`, {
      members: more > 0 ? { errors, moreErrors: more } : { errors },
    });
  }
}

export class TooManyRequests extends Problem {
  constructor(detail: string, retryAfterSeconds: number) {
    super("too-many-requests", detail, { headers: { "Retry-After": String(retryAfterSeconds) } });
  }
}

/** 503: try again after some seconds. */
export class Unavailable extends Problem {
  constructor(slug: "draining" | "not-ready" | "not-built", detail: string, retryAfterSeconds = 5) {
    super(slug, detail, { headers: { "Retry-After": String(retryAfterSeconds) } });
  }
}
