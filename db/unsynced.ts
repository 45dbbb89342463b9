import { open } from 'node:fs/promises'
import path from 'node:path'
import { sql, type Kysely } from 'kysely'
import { syncFolder } from '@/lib/platform/storage/sync-folder'
import { fileOf } from './file-of'
import type { DB } from './schema'

/**
 * Commits without waiting for the disk (WAL with synchronous = NORMAL), which blocks the whole process for 1 to 80 ms: for work
 * that is done again where it is missing. A killed process loses nothing; a power cut may take the newest such commits back,
 * never one that came before a synced one. Not for use inside a transaction.
 */
export async function unsynced<T>(db: Kysely<DB>, work: (connection: Kysely<DB>) => Promise<T>): Promise<T> {
  return db.connection().execute(async (connection) => {
    await sql`pragma synchronous = normal`.execute(connection)
    try {
      return await work(connection)
    } finally {
      await sql`pragma synchronous = full`.execute(connection)
    }
  })
}

/** The log is made anew with a connection's first write and stays while it is open. */
const namedLogs = new WeakSet<Kysely<DB>>()

/** Brings all that was committed to disk, in a thread beside the process's own. */
export async function syncCommits(db: Kysely<DB>): Promise<void> {
  const file = await fileOf(db)
  if (file === null) return
  const log = await open(`${file}-wal`, 'r+')
  try {
    await log.sync()
  } finally {
    await log.close()
  }
  // SQLite syncs the log's name with its own first sync of the log, which may not have come yet.
  if (namedLogs.has(db)) return
  await syncFolder(path.dirname(file))
  namedLogs.add(db)
}
