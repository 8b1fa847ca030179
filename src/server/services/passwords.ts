import { hash, verify } from '@node-rs/argon2';

/** Argon2id at the library's defaults, which follow the published minimum recommendations for this hash. */
export const hashPassword = (password: string) => hash(password);

/** Checks a password; without a hash it does the same work against a fixed one, so that time tells nothing. */
export async function checkPassword(passwordHash: string | null, password: string): Promise<boolean> {
  const matches = await verify(passwordHash ?? (await decoy()), password);
  return passwordHash !== null && matches;
}

let decoyHash: Promise<string> | undefined;
const decoy = () => (decoyHash ??= hash('no account has this password'));
