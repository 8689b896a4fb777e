import { z } from "zod";
import { ROLES } from "../domain/roles.ts";
import { id, timestamp } from "./common.ts";

export const email = z.email().max(320).meta({ id: "Email" });
/** NIST SP 800-63B and OWASP ASVS 5, 6.2: length only, no composition rules, at least 64 allowed. */
export const password = z.string().min(12, "must have at least 12 characters").max(128);

export const credentials = z.strictObject({ email, password: z.string().min(1).max(1000) }).meta({ id: "Credentials" });
export const person = z.object({ id, name: z.string(), email, admin: z.boolean() }).meta({ id: "Person" });
export type Person = z.infer<typeof person>;
export const session = z.object({ user: person, csrfToken: z.string() }).meta({ id: "Session" });
export type Session = z.infer<typeof session>;

export const member = z
  .object({
    person: z.object({ id, name: z.string(), email, admin: z.boolean(), pending: z.boolean() }),
    role: z.enum(ROLES),
    since: timestamp,
    abilities: z.record(z.string(), z.boolean()),
  })
  .meta({ id: "Member" });
export type Member = z.infer<typeof member>;
export const addMember = z
  .strictObject({ email, name: z.string().trim().min(1).max(200).optional(), role: z.enum(ROLES) })
  .meta({ id: "AddMember" });
/** `link` is the one-time address at which a person new here sets a password; shown once. */
export const addedMember = z.object({ member, link: z.string().nullable() }).meta({ id: "AddedMember" });
export const patchMember = z.strictObject({ role: z.enum(ROLES) }).meta({ id: "PatchMember" });

const name = z.string().trim().min(1).max(200);
const linkToken = z.string().min(1).max(200);
/** Makes the first administrator, with the one-time token of the set-up link. */
export const setUp = z.strictObject({ token: linkToken, email, name, password }).meta({ id: "SetUp" });
export const acceptInvitation = z.strictObject({ token: linkToken, name, password }).meta({ id: "AcceptInvitation" });
export const changePassword = z
  .strictObject({ current: z.string().min(1).max(1000), password })
  .meta({ id: "ChangePassword" });

/** A person as an administrator sees them. */
export const personRow = person
  .extend({ pending: z.boolean(), disabled: z.boolean(), since: timestamp })
  .meta({ id: "PersonRow" });
export const patchPerson = z
  .strictObject({ admin: z.boolean().optional(), disabled: z.boolean().optional() })
  .meta({ id: "PatchPerson" });
/** A one-time address at which the person sets a (new) password; shown once. */
export const oneTimeLink = z.object({ link: z.string() }).meta({ id: "OneTimeLink" });
