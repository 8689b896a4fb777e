import { z } from "zod";
import { commitBuild, nextTest, suspect } from "./break.ts";
import { id, laneName, pageQuery, sha } from "./common.ts";

/** A rise that the tolerance does not see: slow (climb) or in one build (jump). */
export const climb = z
  .object({
    id,
    kind: z.enum(["climb", "jump"]),
    /** True of a climb that is a jump which stayed. */
    jumped: z.boolean(),
    state: z.enum(["open", "ended"]),
    lane: laneName,
    model: z.string(),
    /** First build of the rise. */
    onset: commitBuild,
    /** The build that told it. */
    toldBy: commitBuild,
    /** The build before the onset: what the suspects begin after. */
    lastCalm: commitBuild.nullable(),
    endedBy: commitBuild.nullable(),
    entryCount: z.number().int(),
    /** Of those, entries that climb still. */
    openCount: z.number().int(),
    /** Builds from the onset on to the one that is spoken of. */
    builds: z.number().int(),
    /** The entry that rose most. */
    worst: z.object({
      blockId: id,
      output: z.string(),
      input: z.string(),
      point: z.string(),
      row: z.number().int(),
      column: z.number().int(),
      /** Decades above its baseline in the build that is spoken of; null where that tells nothing of it. */
      decades: z.number().nullable(),
    }),
    sentence: z.string(),
    suspectCount: z.number().int(),
    /** Most likely first. */
    suspects: z.array(suspect),
    nextTest: nextTest.nullable(),
  })
  .meta({ id: "Climb" });
export type ClimbRow = z.infer<typeof climb>;

export const climbsQuery = z.strictObject({
  lane: laneName.optional(),
  state: z.enum(["open", "ended", "all"]).optional(),
  at: sha.optional(),
  ...pageQuery,
});
