import SQLite from 'better-sqlite3'
import {
  CompiledQuery,
  Kysely,
  SqliteDialect,
  SqliteDriver,
  type DatabaseConnection,
  type Driver,
  type SqliteDialectConfig,
} from 'kysely'
import { keepStatements } from './kept-statements'
import { migrateToLatest } from './migrator'
import type { DB } from './schema'

/**
 * Kysely's driver opens transactions with a plain BEGIN, which takes the write lock at the first write: two processes that
 * both read first then fail with SQLITE_BUSY_SNAPSHOT, which no busy timeout cures. Every transaction here is a write.
 */
class ImmediateDriver extends SqliteDriver {
  override async beginTransaction(connection: DatabaseConnection): Promise<void> {
    await connection.executeQuery(CompiledQuery.raw('begin immediate'))
  }
}

class ImmediateDialect extends SqliteDialect {
  readonly #config: SqliteDialectConfig
  constructor(config: SqliteDialectConfig) {
    super(config)
    this.#config = config
  }
  override createDriver(): Driver {
    return new ImmediateDriver(this.#config)
  }
}

/** Opens the file (making it if missing), without migrating. A grade that was acknowledged is on disk: WAL with FULL sync. */
export function openDatabase(path: string): Kysely<DB> {
  const sqlite = new SQLite(path)
  sqlite.pragma('journal_mode = WAL')
  sqlite.pragma('synchronous = FULL')
  sqlite.pragma('foreign_keys = ON')
  sqlite.pragma('busy_timeout = 10000')
  return new Kysely<DB>({ dialect: new ImmediateDialect({ database: keepStatements(sqlite) }) })
}

/** A fresh database in memory with every migration applied: the real schema and triggers, for tests. */
export async function openMemoryDatabase(): Promise<Kysely<DB>> {
  const db = openDatabase(':memory:')
  await migrateToLatest(db)
  return db
}
