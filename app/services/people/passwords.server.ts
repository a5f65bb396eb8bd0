import { hash, verify } from "@node-rs/argon2";

/**
 * argon2id with 19 MiB, two passes, one lane: the minimum that OWASP's password storage cheat sheet names (from
 * memory). The parameters are written into each hash, so that raising them here keeps old hashes valid.
 */
const parameters = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** An argon2id hash in PHC string format. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, parameters);
}

let decoy: Promise<string> | undefined;

/**
 * Whether the password belongs to the hash. Without a hash (nobody has that mail, or they never accepted their
 * invitation) it takes the same work and says no.
 */
export async function passwordMatches(passwordHash: string | null, password: string): Promise<boolean> {
  decoy ??= hashPassword("no person has this one");
  const matches = await verify(passwordHash ?? (await decoy), password);
  return passwordHash !== null && matches;
}
