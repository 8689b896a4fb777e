import { asProblem } from "../api/problem.ts";
import { useNoticesStore } from "../stores/notices.ts";

/** Does something that a button asked for, and says in a notice that it was done, or why it was not. */
export function useAttempt() {
  const notices = useNoticesStore();
  return async (work: () => Promise<unknown>, words: { done?: string; failed?: string } = {}): Promise<void> => {
    try {
      await work();
      if (words.done !== undefined) notices.tell(words.done);
    } catch (error) {
      const { message } = asProblem(error);
      notices.tell(words.failed === undefined ? message : `${words.failed}: ${message}`, "trouble");
    }
  };
}
