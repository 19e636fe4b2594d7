import { hash, verify } from "@node-rs/argon2";

// Argon2id, 19 MiB, 2 passes, 1 lane: the OWASP password storage cheat sheet's first choice. Argon2id is the package's default.
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize("NFKC"), cost);
}

let nobodys: Promise<string> | undefined;

/**
 * Whether a password is the one behind a hash. Where there is no hash, the same work is done for nothing, so that the time
 * taken does not tell which addresses have an account.
 */
export async function checkPassword(stored: string | null, password: string): Promise<boolean> {
  nobodys ??= hashPassword("nobody has this password");
  const matches = await verify(stored ?? (await nobodys), password.normalize("NFKC"));
  return stored !== null && matches;
}
