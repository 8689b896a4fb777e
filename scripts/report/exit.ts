/** How the reporter ends; a CI job may tell them apart. */
export const EXIT = { pass: 0, gateFailed: 1, wrongUse: 2, notPosted: 3 } as const;
export type ExitCode = (typeof EXIT)[keyof typeof EXIT];

/** Ends the reporter with a message for people and an exit code. */
export class ReportError extends Error {
  readonly exitCode: ExitCode;
  constructor(exitCode: ExitCode, message: string) {
    super(message);
    this.exitCode = exitCode;
  }
}

export const wrongUse = (message: string): ReportError => new ReportError(EXIT.wrongUse, message);
export const notPosted = (message: string): ReportError => new ReportError(EXIT.notPosted, message);
