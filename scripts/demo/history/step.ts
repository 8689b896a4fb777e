import type { LaneName } from "../blocks.ts";
import type { Code } from "../code.ts";

/** Short names of the invented team; see people.ts. */
export type AuthorKey = "ines" | "tomas" | "mara" | "joon";

/** Which mistake a commit plants; see planted.ts. */
export type PlantKey =
  | "flipped-sign"
  | "degrees"
  | "left-behind"
  | "single-precision"
  | "dropped-term"
  | "swallowed-imaginary"
  | "loosened-solve"
  | "reordered-rows"
  | "per-cent"
  | "silent-lane";

/** One commit of the scripted history. */
export interface Step {
  readonly by: AuthorKey;
  readonly subject: string;
  readonly paths: readonly string[];
  /** What it changes in the code base; nothing for notes and scripts. */
  readonly set?: Partial<Code>;
  /** Branch that it is on; `main` if not said. A branch begins at the newest commit of main. */
  readonly branch?: string;
  /** Branch that it merges into main. */
  readonly merges?: string;
  /** Lanes that build it at once; nobody does during an outage. */
  readonly lanes: readonly LaneName[];
  readonly plants?: PlantKey;
}

export const BOTH: readonly LaneName[] = ["gcc-release", "clang-arm"];
export const GCC: readonly LaneName[] = ["gcc-release"];
/** The CI was down, or too busy: nothing is built. */
export const UNBUILT: readonly LaneName[] = [];
