import type { Router } from "vue-router";
import { useNoticesStore } from "../stores/notices.ts";
import { useSessionStore } from "../stores/session.ts";

/** The server says that the session is over: sign in, and come back to the same place. */
export function signInAgain(router: Router): void {
  const session = useSessionStore();
  if (!session.signedIn) return;
  session.end();
  useNoticesStore().tell("Your session has ended. Sign in to go on where you were.", "trouble");
  void router.push({ name: "sign-in", query: { next: router.currentRoute.value.fullPath } });
}

/** Only an address of this application may follow a sign-in. */
export function safeNext(next: unknown): string {
  return typeof next === "string" && /^\/(?![/\\])/.test(next) ? next : "/";
}
