import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { Kysely } from 'kysely'
import { openMemoryDatabase } from '@/db/connection'
import type { DB } from '@/db/schema'
import { commitTogether } from './commit-together'

let db: Kysely<DB>
beforeEach(async () => void (db = await openMemoryDatabase()))
afterEach(() => db.destroy())

const add = (key: string) => async (transaction: Kysely<DB>) => {
  await transaction.insertInto('site').values({ key, value: '' }).execute()
  return key
}
const keys = async () => (await db.selectFrom('site').select('key').orderBy('key').execute()).map(({ key }) => key)

describe('work of several requests', () => {
  it('that comes together is committed together, and each has its own answer', async () => {
    const inside: number[] = []
    const counted = (key: string) => async (transaction: Kysely<DB>) => {
      const made = await add(key)(transaction)
      inside.push((await transaction.selectFrom('site').selectAll().execute()).length)
      return made
    }
    const before = (await keys()).length
    expect(await Promise.all([commitTogether(db, counted('a')), commitTogether(db, counted('b'))])).toEqual(['a', 'b'])
    expect(inside).toEqual([before + 1, before + 2])
    expect(await keys()).toEqual(expect.arrayContaining(['a', 'b']))
  })

  it('is done although another of them fails, of which nothing is kept', async () => {
    const fails = async (transaction: Kysely<DB>) => {
      await add('half')(transaction)
      throw new Error('no room')
    }
    const answers = await Promise.allSettled([
      commitTogether(db, add('a')),
      commitTogether(db, fails),
      commitTogether(db, add('b')),
    ])
    expect(answers.map(({ status }) => status)).toEqual(['fulfilled', 'rejected', 'fulfilled'])
    expect(answers[1]).toMatchObject({ reason: new Error('no room') })
    expect(await keys()).toEqual(expect.arrayContaining(['a', 'b']))
    expect(await keys()).not.toContain('half')
  })

  it('goes on after any number', async () => {
    const wanted = Array.from({ length: 30 }, (_, index) => `k${index}`)
    expect(await Promise.all(wanted.map((key) => commitTogether(db, add(key))))).toEqual(wanted)
    expect(await commitTogether(db, add('last'))).toBe('last')
    expect(await keys()).toEqual(expect.arrayContaining([...wanted, 'last']))
  })
})
