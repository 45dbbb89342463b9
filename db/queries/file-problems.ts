import { sql, type Kysely, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { FileFate, FileRow } from '../schema/intake'
import { among } from './by-ids'

export interface NewFileProblem {
  line: number | null
  sentence: string
}

const ROWS_PER_STATEMENT = 500

/** In place of those that the file has. */
export async function replaceFileProblems(
  db: Kysely<DB>,
  fileId: number,
  problems: readonly NewFileProblem[],
): Promise<void> {
  await db.deleteFrom('file_problem').where('file_id', '=', fileId).execute()
  for (let start = 0; start < problems.length; start += ROWS_PER_STATEMENT) {
    const part = problems.slice(start, start + ROWS_PER_STATEMENT)
    await db
      .insertInto('file_problem')
      .values(part.map(({ line, sentence }) => ({ file_id: fileId, line, sentence })))
      .execute()
  }
}

export interface FileWithProblem {
  id: number
  name: string
  kind: FileRow['kind']
  batch: string
  fate: FileFate
  fault: string | null
  reason: string | null
  createdAt: string
}

/** Files in force that are refused, or of which a note or a part's problem is to be told, by key. */
export async function listFilesWithProblems(
  db: Kysely<DB>,
  campaignId: number,
  afterId: number,
  limit: number,
): Promise<FileWithProblem[]> {
  return db
    .selectFrom('file')
    .innerJoin('batch', 'batch.id', 'file.batch_id')
    .select([
      'file.id',
      'file.name',
      'file.kind',
      'batch.name as batch',
      'file.fate',
      'file.fault',
      'file.reason',
      'file.created_at as createdAt',
    ])
    .where('file.campaign_id', '=', campaignId)
    .where('file.id', '>', afterId)
    .where('file.replaced_by', 'is', null)
    .where(
      sql<SqlBool>`(file.fate = 'refused' or (file.fate = 'imaged' and file.reason is not null)
        or exists (select 1 from file_problem where file_problem.file_id = file.id))`,
    )
    .orderBy('file.id')
    .limit(limit)
    .execute()
}

export async function listProblemsOfFile(
  db: Kysely<DB>,
  fileId: number,
  afterId: number,
  limit: number,
): Promise<{ id: number; line: number | null; sentence: string }[]> {
  return db
    .selectFrom('file_problem')
    .select(['id', 'line', 'sentence'])
    .where('file_id', '=', fileId)
    .where('id', '>', afterId)
    .orderBy('id')
    .limit(limit)
    .execute()
}

/** Of these files, those that have problems of their parts. */
export async function listFilesWithParts(db: Kysely<DB>, fileIds: readonly number[]): Promise<Set<number>> {
  const rows = await db
    .selectFrom('file_problem')
    .select('file_id')
    .distinct()
    .where('file_id', 'in', among(fileIds))
    .execute()
  return new Set(rows.map((row) => row.file_id))
}
