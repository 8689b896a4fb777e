import { hash, verify } from "@node-rs/argon2";

/** OWASP's second choice for argon2id (19 MiB, two passes, one lane), which is also the package's default algorithm. */
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize("NFKC"), COST);
}

let nobody: Promise<string> | null = null;

/** Takes as long for nobody's password as for somebody's, so that time does not tell which addresses are known. */
export async function passwordMatches(password: string, hashed: string | null): Promise<boolean> {
  nobody ??= hashPassword("the password of nobody at all");
  const matches = await verify(hashed ?? (await nobody), password.normalize("NFKC"));
  return hashed !== null && matches;
}
