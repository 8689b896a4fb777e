import type { Session } from "../../../shared/schemas/people.ts";
import type { Context } from "../../context.ts";
import { csrfTokenOf } from "./csrfToken.ts";

interface Somebody {
  readonly id: number;
  readonly name: string;
  readonly email: string;
  readonly admin: boolean;
}

export function presentSession(context: Context, somebody: Somebody, sessionId: string): Session {
  return {
    user: { id: String(somebody.id), name: somebody.name, email: somebody.email, admin: somebody.admin },
    csrfToken: csrfTokenOf(context, sessionId),
  };
}
