import 'server-only'
import { randomInt } from 'node:crypto'
import type { Kysely } from 'kysely'
import { deleteSiteValues, getSiteValue, hasAdministrator, setSiteValue } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { conflict, invalid, Problem } from '@/lib/platform/problems/problem'
import { hashSecret, secretMatches } from './secrets'

/**
 * The one-time code by which whoever starts the server proves it to the first-visit page. It lives as long as there is no
 * administrator; each start makes another. Stored: its hash, and how often somebody guessed wrong.
 */
const CODE_KEY = 'setup-code'
const MISSES_KEY = 'setup-code-misses'

/** Without 0, 1, I, L, O and U, which are misread. 12 of these 30 make 59 bits. */
const ALPHABET = '23456789ABCDEFGHJKMNPQRSTVWXYZ'
const FREE_MISSES = 3
const LONGEST_WAIT_S = 300

interface Misses {
  count: number
  waitUntil: string
}

const normalised = (code: string) => code.toUpperCase().replace(/[^A-Z0-9]/g, '')

/** Makes a code and returns it to be printed, or null (and forgets the old one) where there is an administrator. */
export async function makeSetupCode(db: Kysely<DB>): Promise<string | null> {
  return db.transaction().execute(async (transaction) => {
    await deleteSiteValues(transaction, [CODE_KEY, MISSES_KEY])
    if (await hasAdministrator(transaction)) return null
    const letters = Array.from({ length: 12 }, () => ALPHABET[randomInt(ALPHABET.length)]).join('')
    await setSiteValue(transaction, CODE_KEY, hashSecret(letters))
    return letters.replace(/(.{4})(?=.)/g, '$1-')
  })
}

/** The first wrong codes are free; each one after them doubles the wait: 2 s, 4 s, 8 s … five minutes. */
function waitSeconds(count: number): number {
  return count < FREE_MISSES ? 0 : Math.min(LONGEST_WAIT_S, 2 ** (count - FREE_MISSES + 1))
}

function wrongCode(count: number): Problem {
  const wait = waitSeconds(count)
  const sentence = 'This is not the code that the server printed at its last start.'
  const reason = wait ? `${sentence} Wait ${wait} seconds before the next try.` : sentence
  return invalid(reason, [{ name: 'code', reason }])
}

/**
 * Refuses a wrong code and counts it. Runs in its own transaction, which must stay even though this throws.
 * @throws Problem 409 there is an administrator; 429 too soon after wrong codes; 422 wrong code.
 */
export async function assertSetupCode(db: Kysely<DB>, code: string): Promise<void> {
  const problem = await db.transaction().execute(async (transaction): Promise<Problem | null> => {
    if (await hasAdministrator(transaction)) return administratorExists()
    const stored = await getSiteValue(transaction, CODE_KEY)
    if (!stored) return conflict('no-setup-code', 'There is no code yet. Start the server again: it prints one.')
    const text = await getSiteValue(transaction, MISSES_KEY)
    const misses: Misses = text ? (JSON.parse(text) as Misses) : { count: 0, waitUntil: '' }
    if (isoTime() < misses.waitUntil) {
      const seconds = Math.ceil((Date.parse(misses.waitUntil) - Date.parse(isoTime())) / 1000)
      return new Problem(429, 'slow-down', `Too many wrong codes. Wait ${seconds} seconds, then try again.`)
    }
    if (secretMatches(normalised(code), stored)) return null
    const count = misses.count + 1
    await setSiteValue(
      transaction,
      MISSES_KEY,
      JSON.stringify({ count, waitUntil: isoTime(waitSeconds(count) * 1000) } satisfies Misses),
    )
    return wrongCode(count)
  })
  if (problem) throw problem
}

/** Inside the transaction that makes the administrator: of two who have the code, one comes first. */
export async function spendSetupCode(transaction: Kysely<DB>): Promise<void> {
  if (await hasAdministrator(transaction)) throw administratorExists()
  await deleteSiteValues(transaction, [CODE_KEY, MISSES_KEY])
}

function administratorExists(): Problem {
  return conflict(
    'administrator-exists',
    'This site has its administrator already, and the code works no more. Sign in.',
  )
}
