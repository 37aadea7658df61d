import { hash, verify } from "@node-rs/argon2";

/** OWASP's recommendation for argon2id: 19 MiB, 2 passes, 1 lane. (Password Storage Cheat Sheet; from memory.) */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

const shortest = 15;
const longest = 256;

/**
 * Phrases of 15 characters or more that are tried first. A beginning only: most common passwords are shorter than
 * the least length and refused by it already.
 */
const common = new Set([
  "passwordpassword",
  "password12345678",
  "password123456789",
  "123456789012345",
  "1234567890123456",
  "12345678901234567890",
  "qwertyuiopasdfgh",
  "qwertyuiopasdfghjkl",
  "qwertyuiopasdfghjklzxcvbnm",
  "abcdefghijklmno",
  "abcdefghijklmnopqrstuvwxyz",
  "iloveyouiloveyou",
  "correcthorsebatterystaple",
  "correct horse battery staple",
  "letmeinletmeinletmein",
  "administratoradministrator",
  "bondwrightbondwright",
]);

/** What is wrong with a new password, in one sentence, or null (NIST SP 800-63B-4, section 3.1.1.2). */
export function passwordProblem(password: string): string | null {
  const characters = [...password.normalize("NFC")];
  if (characters.length < shortest) return `A password has at least ${shortest} characters.`;
  if (characters.length > longest) return `A password has at most ${longest} characters.`;
  if (new Set(characters).size < 4) return "This password repeats too few characters.";
  if (common.has(password.normalize("NFC").toLowerCase()))
    return "This password is among those that are tried first.";
  return null;
}

export function hashPassword(password: string): Promise<string> {
  return hash(password.normalize("NFC"), cost);
}

/** Takes as long for nobody (null) as for somebody, so that the time does not tell who has an account. */
export async function passwordMatches(hashed: string | null, password: string): Promise<boolean> {
  const tried = [...password].length > longest ? "" : password.normalize("NFC");
  const matches = await verify(hashed ?? (await nobody()), tried);
  return hashed !== null && matches;
}

let nobodysHash: Promise<string> | undefined;

function nobody(): Promise<string> {
  nobodysHash ??= hash("no password opens this account", cost);
  return nobodysHash;
}
