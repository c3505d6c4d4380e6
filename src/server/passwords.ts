import { hash, verify, type Options } from '@node-rs/argon2';

/** argon2id (the library's default kind) with 19 MiB, two passes, one lane: the OWASP Password Storage Cheat Sheet's first choice. */
const cost: Options = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

// The same password typed on two keyboards may differ in its bytes (NIST SP 800-63B asks for a normal form before hashing).
const normal = (typed: string): string => typed.normalize('NFKC');

/** The hash to keep, with its salt and cost in it. */
export const hashPassword = (typed: string): Promise<string> => hash(normal(typed), cost);

let decoy: Promise<string> | undefined;

/**
 * Whether the password is the one of this hash. Without an account (`null`) the same work is done on a decoy, so that the time
 * taken does not tell whether an address is known.
 */
export async function passwordMatches(kept: string | null, typed: string): Promise<boolean> {
  decoy ??= hashPassword('a decoy that nobody types');
  const real = kept !== null && kept.startsWith('$argon2');
  const same = await verify(real ? kept : await decoy, normal(typed));
  return real && same;
}
