import type { ListedError } from "./complaints.ts";

/** Why a posting was refused, in a form that crosses threads; the route turns it into a problem of the house. */
export type Rejection =
  | { readonly kind: "malformed-json"; readonly detail: string }
  | { readonly kind: "malformed-encoding"; readonly detail: string }
  | { readonly kind: "too-large"; readonly detail: string }
  | { readonly kind: "invalid"; readonly errors: readonly ListedError[]; readonly more: number };

export class RejectedPosting extends Error {
  readonly rejection: Rejection;
  constructor(rejection: Rejection) {
    super(rejection.kind);
    this.rejection = rejection;
  }
}
