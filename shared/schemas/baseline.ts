import { z } from "zod";
import { id, sha, timestamp } from "./common.ts";
import { selector } from "./waiver.ts";

export const acceptBaseline = z
  .strictObject({
    selector,
    /** Drift of the selected entries is measured from the builds of this commit and those after it. */
    commit: sha,
    reason: z.string().trim().min(1).max(5000),
  })
  .meta({ id: "AcceptBaseline" });

export const baseline = z
  .object({
    id,
    selector,
    commit: sha,
    reason: z.string(),
    acceptedBy: z.string().nullable(),
    acceptedAt: timestamp,
  })
  .meta({
    id: "Baseline",
    description: "From here on a lead accepted the level of error that drift is measured from.",
  });
export type BaselineRow = z.infer<typeof baseline>;
