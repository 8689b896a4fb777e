import { defineStore } from "pinia";
import { computed, ref } from "vue";
import type { Person, Session } from "../../shared/schemas/people.ts";
import { client, setCsrfToken } from "../api/client.ts";
import { ApiProblem } from "../api/problem.ts";

/** Who is signed in. `known` is false until the server has been asked once. */
export const useSessionStore = defineStore("session", () => {
  const user = ref<Person | null>(null);
  const known = ref(false);
  const signedIn = computed(() => user.value !== null);

  function take(session: Session | null): void {
    user.value = session?.user ?? null;
    setCsrfToken(session?.csrfToken ?? null);
    known.value = true;
  }

  /** Asks the server who this is; only "signed out" is swallowed. */
  async function load(): Promise<void> {
    try {
      take(await client.get<Session>("/session", { expectSignedOut: true }));
    } catch (error) {
      if (!(error instanceof ApiProblem && error.status === 401)) throw error;
      take(null);
    }
  }

  async function signIn(email: string, password: string): Promise<void> {
    take(await client.post<Session>("/session", { email, password }, { expectSignedOut: true }));
  }

  async function signOut(): Promise<void> {
    await client.remove("/session");
    take(null);
  }

  return { user, known, signedIn, take, load, signIn, signOut, end: () => take(null) };
});
