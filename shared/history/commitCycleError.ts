/** Thrown where posted parents run in a circle: no commit can be its own ancestor. */
export class CommitCycleError extends Error {
  /** Commits on one such circle, each a parent of the one before it. */
  readonly shas: readonly string[];

  constructor(shas: readonly string[]) {
    const shown = shas.slice(0, 5).map((sha) => sha.slice(0, 12));
    const rest = shas.length > shown.length ? ` and ${shas.length - shown.length} more` : "";
    super(`The parents of these commits run in a circle: ${shown.join(", ")}${rest}.`);
    this.name = "CommitCycleError";
    this.shas = shas;
  }
}
