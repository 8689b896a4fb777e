/**
 * Every kind of problem that the API answers with. The slug makes the permanent `type` (`/problems/<slug>`); `about` is
 * what the page at that address says to whoever looks it up.
 */
export const PROBLEMS = {
  "malformed-request": {
    status: 400,
    title: "The request cannot be read",
    about:
      "The body is not JSON in UTF-8, or is no whole gzip stream. The detail names the line and column. A number that is not finite is sent as one of the strings NaN, Infinity and -Infinity.",
  },
  "not-signed-in": {
    status: 401,
    title: "No valid credentials",
    about:
      "This address needs a session (sign in on the pages) or a token (Authorization: Bearer clg_...). The session may have ended; the token may be mistyped, expired or revoked.",
  },
  "sign-in-failed": {
    status: 401,
    title: "The e-mail address or the password is not right",
    about: "The two do not belong together, or the account was closed. Which of them is wrong is not told.",
  },
  "not-allowed": {
    status: 403,
    title: "You may not do this",
    about:
      "You are known, but your role or the scopes of your token do not cover this. A lead of the project can change that.",
  },
  "csrf-token": {
    status: 403,
    title: "The X-CSRF-Token header is missing or not right",
    about:
      "A change made with the session cookie repeats the csrfToken that POST /session and GET /session answer, in the header X-CSRF-Token.",
  },
  "not-found": {
    status: 404,
    title: "There is nothing at this address",
    about: "It does not exist, or you may not know of it. Projects of which you are no member answer like this.",
  },
  "method-not-allowed": {
    status: 405,
    title: "This address does not take that method",
    about: "The Allow header lists the methods that it takes.",
  },
  conflict: {
    status: 409,
    title: "This conflicts with what is recorded",
    about: "Something recorded before says otherwise: the detail names it. Nothing was changed.",
  },
  "too-large": {
    status: 413,
    title: "The body is too large",
    about: "The detail names the limit and its value. An operator can raise it; a build can be posted in shards.",
  },
  "unsupported-media": {
    status: 415,
    title: "The body is of a kind that this address does not take",
    about: "Send application/json in UTF-8; where Accept-Encoding of the answer lists gzip, it may be gzipped.",
  },
  invalid: {
    status: 422,
    title: "The document is not valid",
    about:
      "It is JSON, but does not say what this address needs. `errors` points at the first fifty places (RFC 6901 pointers); `moreErrors` counts the rest. Nothing was kept.",
  },
  "too-many-requests": {
    status: 429,
    title: "Too many requests",
    about: "Wait as many seconds as the Retry-After header says.",
  },
  internal: {
    status: 500,
    title: "The server made a mistake",
    about:
      "It is recorded under the request id, which the answer repeats as `instance`. Nothing of the request was kept.",
  },
  draining: {
    status: 503,
    title: "The server is being stopped",
    about: "It finishes what it has begun. Send the same request again after as many seconds as Retry-After says.",
  },
  "not-ready": {
    status: 503,
    title: "The server is not ready",
    about: "The database cannot be written just now, or the server is starting or stopping.",
  },
  "not-built": {
    status: 503,
    title: "This file has not been built",
    about: "The pages and the reporter are built by `npm run build`; `npm start` does it by itself.",
  },
} as const satisfies Record<string, { status: number; title: string; about: string }>;

export type ProblemSlug = keyof typeof PROBLEMS;
