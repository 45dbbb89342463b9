import { sql, type Kysely } from 'kysely'

/** The file of a database; null for one in memory. */
export async function fileOf<T>(db: Kysely<T>): Promise<string | null> {
  const { rows } = await sql<{ name: string; file: string }>`pragma database_list`.execute(db)
  return rows.find(({ name }) => name === 'main')?.file || null
}
