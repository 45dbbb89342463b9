import 'server-only'
import { hash, verify } from '@node-rs/argon2'
import { z } from 'zod'

export const LEAST_PASSWORD_LENGTH = 10

/** Length is the only demand: NIST SP 800-63B section 3.1.1.2 advises against composition rules. */
export const Password = z
  .string()
  .min(
    LEAST_PASSWORD_LENGTH,
    `The password needs at least ${LEAST_PASSWORD_LENGTH} characters; a short sentence does well.`,
  )
  .max(200, 'The password may have at most 200 characters.')

export const PASSWORD_HINT = `At least ${LEAST_PASSWORD_LENGTH} characters; a short sentence does well.`

/** Argon2id with 19 MiB, two passes and one lane: the first of the settings that OWASP's password storage sheet names. */
const SETTINGS = { memoryCost: 19_456, timeCost: 2, parallelism: 1 } as const

export function hashPassword(password: string): Promise<string> {
  return hash(password, SETTINGS)
}

let decoy: Promise<string> | undefined

/** An account without a password costs as much time as one with: an answer's delay must not tell which addresses exist. */
export async function passwordMatches(password: string, passwordHash: string | null): Promise<boolean> {
  decoy ??= hashPassword('no account has this password')
  const matches = await verify(passwordHash ?? (await decoy), password)
  return matches && passwordHash !== null
}
