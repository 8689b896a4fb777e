import type { z } from "zod";
import type { addedMember } from "../../shared/schemas/people.ts";
import type { createdToken } from "../../shared/schemas/token.ts";
import { acceptInvitation } from "./client.ts";
import type { Client } from "./client.ts";
import { MAIN } from "./history/history.ts";
import { DEMO_MEMBERS, DEMO_PASSWORD } from "./people.ts";

export const PROJECT = "tidewheel";

/** Opens the project, brings its people in through their invitations, and answers a token for its CI. */
export async function openProject(url: string, administrator: Client): Promise<string> {
  await administrator.post("/projects", { slug: PROJECT, name: "Tidewheel", defaultBranch: MAIN });
  for (const { email, name, role } of DEMO_MEMBERS) {
    const invited = await administrator.post<z.infer<typeof addedMember>>(`/projects/${PROJECT}/invitations`, {
      email,
      name,
      role,
    });
    if (invited.link !== null) await acceptInvitation(url, invited.link, name, DEMO_PASSWORD);
  }
  const wish = { name: "continuous integration", scopes: ["post", "read"] };
  const { token } = await administrator.post<z.infer<typeof createdToken>>(`/projects/${PROJECT}/tokens`, wish);
  return token;
}
