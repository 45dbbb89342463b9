import type SQLite from 'better-sqlite3'
import type { SqliteDatabase } from 'kysely'

const MOST_KEPT = 400
/** Longer ones are lists of rows, hardly any of which comes twice. */
const LONGEST_KEPT = 6000

/** A pragma does its work while it is compiled, so that it is compiled each time; changes of the schema come once. */
const KEPT = /^\s*(select|with|insert|update|delete|begin|commit|rollback)\b/i

type Statement = ReturnType<SqliteDatabase['prepare']>

/**
 * The database with its statements kept by their text, the least recently used given up first: SQLite compiles a statement of the
 * queue in 0.1 to 0.3 ms, more than it takes to run it, and the same few hundred come again and again. SQLite itself compiles a kept
 * one anew when the schema changes. Each is run to its end before the next is asked for, since nothing streams from the connection.
 */
export function keepStatements(sqlite: SQLite.Database): SqliteDatabase {
  const kept = new Map<string, Statement>()
  return {
    close: () => {
      kept.clear()
      sqlite.close()
    },
    prepare: (sql) => {
      const known = kept.get(sql)
      if (known) kept.delete(sql)
      const statement = known ?? (sqlite.prepare(sql) as unknown as Statement)
      if (sql.length <= LONGEST_KEPT && KEPT.test(sql)) kept.set(sql, statement)
      if (kept.size > MOST_KEPT) kept.delete(kept.keys().next().value as string)
      return statement
    },
  }
}
