import 'server-only'
import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'

/** 256 bits for a link. Only its hash is stored, so that a copy of the database opens nothing. */
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
