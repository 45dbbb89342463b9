import { Migrator, type Kysely } from 'kysely'
import { fileOf } from './file-of'
import { whileLocked } from './migration-lock'
import { migrations } from '@/migrations'

/** A static map instead of a folder scan: Node cannot import .ts files by itself, and bundlers cannot scan. */
function migrator<T>(db: Kysely<T>): Migrator {
  return new Migrator({ db, provider: { getMigrations: async () => migrations } })
}

/**
 * Brings the database to the newest schema and returns the names of what was applied. Throws what the migration threw. Of several
 * processes that start on one file at once, one applies and the others wait.
 */
export async function migrateToLatest<T>(db: Kysely<T>): Promise<string[]> {
  const file = await fileOf(db)
  return file === null ? applyAll(db) : whileLocked(file, () => applyAll(db))
}

async function applyAll<T>(db: Kysely<T>): Promise<string[]> {
  const { error, results } = await migrator(db).migrateToLatest()
  if (error) throw error
  return (results ?? []).filter((result) => result.status === 'Success').map((result) => result.migrationName)
}

/** Takes back every migration, newest first. For tests and for a rollback under an operator's eyes: it drops data. */
export async function migrateToNothing<T>(db: Kysely<T>): Promise<void> {
  for (;;) {
    const { error, results } = await migrator(db).migrateDown()
    if (error) throw error
    if (!results || results.length === 0) return
  }
}
