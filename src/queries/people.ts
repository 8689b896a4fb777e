import type { Session } from "../../shared/schemas/people.ts";
import { client } from "../api/client.ts";

/** The first account, with the one-time token that the server printed. */
export const setUp = (body: { token: string; email: string; name: string; password: string }) =>
  client.post<Session>("/set-up", body, { expectSignedOut: true });

export const acceptInvitation = (body: { token: string; name: string; password: string }) =>
  client.post<Session>("/invitations/accept", body, { expectSignedOut: true });
