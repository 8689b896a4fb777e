import { config } from "zod";

/** Words of the checks that the shared schemas leave without a message of their own. */
config({
  // The content policy forbids compiling text to code, which zod would otherwise try.
  jitless: true,
  customError: (issue) => {
    if (issue.code === "too_small" && issue.origin === "string") {
      return Number(issue.minimum) <= 1 ? "Please fill this in." : `Write at least ${issue.minimum} characters.`;
    }
    if (issue.code === "too_big" && issue.origin === "string") return `Write at most ${issue.maximum} characters.`;
    return undefined;
  },
});
