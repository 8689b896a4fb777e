import { z } from "zod";
import { WANTED_REASONS } from "../domain/vocabulary.ts";
import { id, laneName, sha } from "./common.ts";

export const wantedItem = z
  .object({
    commit: sha,
    lane: laneName,
    reason: z.enum(WANTED_REASONS),
    breakIds: z.array(id),
    remainingAfter: z.number().int().nullable(),
  })
  .meta({ id: "WantedItem" });
export const wanted = z.object({ items: z.array(wantedItem) }).meta({ id: "Wanted" });
export type Wanted = z.infer<typeof wanted>;
export const postWanted = z.strictObject({ commit: sha, lane: laneName }).meta({ id: "PostWanted" });
