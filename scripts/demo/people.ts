import type { Role } from "../../shared/domain/roles.ts";
import type { AuthorKey } from "./history/step.ts";

interface Author {
  readonly name: string;
  readonly email: string;
}

/** The invented team that writes the design code. */
export const AUTHORS: Readonly<Record<AuthorKey, Author>> = {
  ines: { name: "Ines Okafor", email: "ines.okafor@tidewheel.example.org" },
  tomas: { name: "Tomas Lindqvist", email: "tomas.lindqvist@tidewheel.example.org" },
  mara: { name: "Mara Delacroix", email: "mara.delacroix@tidewheel.example.org" },
  joon: { name: "Joon Park", email: "joon.park@tidewheel.example.org" },
};

/** Shown to whoever runs the demo; the demo listens on this machine alone. */
export const DEMO_PASSWORD = "turning with the tide";

export const ADMINISTRATOR = { email: "admin@tidewheel.example", name: "Ada Minster" } as const;

export const DEMO_MEMBERS: readonly { readonly email: string; readonly name: string; readonly role: Role }[] = [
  { email: "viewer@tidewheel.example", name: "Viola Ferrant", role: "viewer" },
  { email: "developer@tidewheel.example", name: "Dev Lorrimer", role: "developer" },
  { email: "lead@tidewheel.example", name: "Lea Vandersloot", role: "lead" },
];
