import { hash, verify, type Options } from '@node-rs/argon2'

/** Argon2id (the library's default), 19 MiB, two passes, one lane: a minimum of the OWASP password storage cheat sheet, from memory. */
const options: Options = { memoryCost: 19 * 1024, timeCost: 2, parallelism: 1 }

export const hashPassword = (password: string): Promise<string> => hash(password, options)

let placeholder: Promise<string> | undefined

/** Whether the password is right. Without an account it takes as long, so that the answer's time tells nothing. */
export async function passwordMatches(storedHash: string | undefined, password: string): Promise<boolean> {
  placeholder ??= hashPassword('no account has this password')
  const matches = await verify(storedHash ?? (await placeholder), password)
  return storedHash !== undefined && matches
}
