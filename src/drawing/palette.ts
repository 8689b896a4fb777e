import type { Verdict } from "../../shared/domain/vocabulary.ts";

/** Colours of the paper in force, read once per drawing from the tokens. */
export interface Palette {
  readonly paper: string;
  readonly sheet: string;
  readonly ink: string;
  readonly quiet: string;
  readonly gridFine: string;
  readonly gridCoarse: string;
  readonly trace: string;
  readonly reference: string;
  readonly verdicts: Record<Verdict, string>;
}

export function readPalette(element: Element): Palette {
  const style = getComputedStyle(element);
  const token = (name: string) => style.getPropertyValue(`--${name}`).trim();
  return {
    paper: token("paper"),
    sheet: token("sheet"),
    ink: token("ink"),
    quiet: token("quiet"),
    gridFine: token("grid-fine"),
    gridCoarse: token("grid-coarse"),
    trace: token("trace"),
    reference: token("reference"),
    verdicts: {
      agrees: token("agrees"),
      disagrees: token("disagrees"),
      unresolved: token("unresolved"),
      unreferenced: token("unreferenced"),
      invalid: token("invalid"),
    },
  };
}
