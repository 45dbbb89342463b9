import { CompiledQuery, type Kysely } from 'kysely'
import type { DB } from '@/db/schema'

/** What SQLite does for the statements of one asking; every plan once. */
export async function plansOf(db: Kysely<DB>, ask: (db: Kysely<DB>) => Promise<unknown>): Promise<string[]> {
  const statements: CompiledQuery[] = []
  const watched = db.withPlugin({
    transformQuery: ({ node, queryId }) => {
      statements.push(db.getExecutor().compileQuery(node, queryId))
      return node
    },
    transformResult: async ({ result }) => result,
  })
  await ask(watched)
  const plans = new Set<string>()
  for (const { sql: text, parameters, query } of statements) {
    if (query.kind !== 'SelectQueryNode' && query.kind !== 'RawNode') continue
    const raw = CompiledQuery.raw(`explain query plan ${text}`, [...parameters])
    for (const { detail } of (await db.executeQuery<{ detail: string }>(raw)).rows) {
      if (/^(SEARCH|SCAN|USE)/.test(detail)) plans.add(detail)
    }
  }
  return [...plans].toSorted()
}
