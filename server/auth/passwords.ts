import { hash, verify } from '@node-rs/argon2';

// Argon2id (the library's default) with 19 MiB, 2 passes, 1 lane: common practice, no source (RFC 9106 section 4 names heavier settings for
// machines that do little else).
const settings = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

export function hashPassword(password: string): Promise<string> {
  return hash(password, settings);
}

let nobodysHash: Promise<string> | undefined;

/** Whether the password fits; nobody's hash (null) takes as long to refuse as a wrong password. */
export async function isPasswordRight(passwordHash: string | null, password: string): Promise<boolean> {
  nobodysHash ??= hashPassword(crypto.randomUUID());
  const isRight = await verify(passwordHash ?? (await nobodysHash), password);
  return passwordHash !== null && isRight;
}
