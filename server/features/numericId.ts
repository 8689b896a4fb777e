import { z } from "zod";

/** An id in a path: to callers it is opaque, and one that we never gave names nothing. */
export const numericId = z
  .string()
  .max(64)
  .transform((text) => (/^\d{1,15}$/.test(text) ? Number(text) : -1));
