import 'server-only'
import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'

/**
 * 256 bits for a link. Of it the hash is stored, and the link itself only in its mail, which forgets it on leaving the site; where
 * there is no mail server, or it has not taken the mail yet, an administrator reads the link in the outbox until the invitation is
 * used, withdrawn or expired. Until then a copy of the database opens what is open.
 */
export function newToken(): string {
  return randomBytes(32).toString('base64url')
}

/** One SHA-256 is enough for a secret that is random and long; passwords, which are neither, take argon2. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex')
}

export function secretMatches(secret: string, storedHash: string): boolean {
  const given = Buffer.from(hashSecret(secret), 'hex')
  const stored = Buffer.from(storedHash, 'hex')
  return given.length === stored.length && timingSafeEqual(given, stored)
}
