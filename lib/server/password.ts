import "server-only";
import { hash, verify } from "@node-rs/argon2";

/** OWASP Password Storage Cheat Sheet: argon2id with 19 MiB, 2 passes, 1 lane. The package's default is argon2id. */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const;

/** An argon2id hash with its own salt, as a PHC string. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, cost);
}

let unmatchable: Promise<string> | undefined;

/**
 * Whether `password` is the one behind `passwordHash`.
 *
 * Without a hash it verifies against one that nothing matches, so that an address without an account takes as long.
 */
export async function verifyPassword(passwordHash: string | null, password: string): Promise<boolean> {
  unmatchable ??= hashPassword(crypto.randomUUID());
  const matches = await verify(passwordHash ?? (await unmatchable), password);
  return matches && passwordHash !== null;
}
