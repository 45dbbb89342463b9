import { sql, type Kysely } from 'kysely'

/**
 * All statements or none, for a new table in place of an old one (lang_altertable.html of SQLite's manual, section 7): foreign
 * keys are off while their table is away, and every reference is looked at before the change is kept.
 */
export async function inOneStep(db: Kysely<unknown>, statements: readonly string[]): Promise<void> {
  await sql.raw('pragma foreign_keys = off').execute(db)
  try {
    await sql.raw('begin immediate').execute(db)
    try {
      for (const statement of statements) await sql.raw(statement).execute(db)
      const broken = await sql.raw('pragma foreign_key_check').execute(db)
      if (broken.rows.length > 0) throw new Error(`References would break: ${JSON.stringify(broken.rows.slice(0, 3))}`)
      await sql.raw('commit').execute(db)
    } catch (error) {
      await sql.raw('rollback').execute(db)
      throw error
    }
  } finally {
    await sql.raw('pragma foreign_keys = on').execute(db)
  }
}

/** For a migration that is its own step: the note that it was applied is written apart from it, and a kill may fall between. */
export async function hasColumn(db: Kysely<unknown>, table: string, column: string): Promise<boolean> {
  const found = await sql.raw(`select 1 from pragma_table_info('${table}') where name = '${column}'`).execute(db)
  return found.rows.length > 0
}

/** Triggers of a table whose rows are appended and never changed. */
export const growsOnly = (table: string): string[] =>
  ['update', 'delete'].map(
    (verb) => `create trigger ${table}_no_${verb} before ${verb} on ${table}
      begin select raise(abort, '${table} rows are never changed: append a new one'); end`,
  )
