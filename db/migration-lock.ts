import { setTimeout } from 'node:timers/promises'
import SQLite from 'better-sqlite3'

const LOOK_AGAIN_MS = 50

/**
 * Does the work while no other process does the same to this database file, and waits for one that does. A migration asks what is
 * there before it begins its step, so two servers that start at once on an old folder would both find it undone. The lock is on a
 * file beside, which stays, empty: the system lets go of it whatever the process dies of.
 */
export async function whileLocked<T>(databaseFile: string, work: () => Promise<T>): Promise<T> {
  const lock = new SQLite(`${databaseFile}-migrating`, { timeout: 0 })
  try {
    while (!tookLock(lock)) await setTimeout(LOOK_AGAIN_MS)
    return await work()
  } finally {
    lock.close()
  }
}

function tookLock(lock: SQLite.Database): boolean {
  try {
    // The journal would be another file.
    lock.pragma('journal_mode = memory')
    lock.exec('begin exclusive')
    return true
  } catch (error) {
    if (error instanceof SQLite.SqliteError && error.code.startsWith('SQLITE_BUSY')) return false
    throw error
  }
}
