import { mkdirSync } from 'node:fs'
import { sql, type Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import type { DB } from '@/db/schema'
import { config } from './config/config'

/** On globalThis because route handlers, pages and instrumentation are bundled apart but share one process. */
const shared = globalThis as typeof globalThis & { ringsideDatabase?: Promise<Kysely<DB>> }

async function openAndMigrate(): Promise<Kysely<DB>> {
  mkdirSync(config().dataFolder, { recursive: true })
  const db = openDatabase(config().databasePath)
  await migrateToLatest(db)
  return db
}

/** The database of this process, opened and migrated at the first call. A failed opening is tried again at the next call. */
export function database(): Promise<Kysely<DB>> {
  shared.ringsideDatabase ??= openAndMigrate().catch((error: unknown) => {
    shared.ringsideDatabase = undefined
    throw error
  })
  return shared.ringsideDatabase
}

/** Throws where the database cannot be read. */
export async function assertReadable(): Promise<void> {
  await sql`select count(*) from site`.execute(await database())
}
