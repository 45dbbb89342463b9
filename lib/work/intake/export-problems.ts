import 'server-only'
import type { Kysely } from 'kysely'
import { listFilesWithParts, listFilesWithProblems, listProblemsOfFile } from '@/db/queries/file-problems'
import type { DB } from '@/db/schema'
import { csvLine } from '@/lib/science/formats/csv'
import type { CampaignPermit } from '@/lib/work/people/permission'

const FILES_PER_PAGE = 500
const HEADER = ['file', 'kind', 'batch', 'fate', 'fault', 'line', 'problem', 'delivered_at']

/**
 * Everything that intake has to say against files in force, as CSV: each refused file, notes on files that are imaged, and
 * what is wrong with single lines of manifests and single members of archives. Read by key, a page at a time.
 */
export async function exportProblems(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
): Promise<{ fileName: string; contentType: string; text: AsyncGenerator<string, void, void> }> {
  return {
    fileName: `${permit.campaign.slug}-problems.csv`,
    contentType: 'text/csv; charset=utf-8; header=present',
    text: problemLines(db, permit.campaign.id),
  }
}

async function* problemLines(db: Kysely<DB>, campaignId: number): AsyncGenerator<string, void, void> {
  yield csvLine(HEADER)
  for (let afterId = 0; ;) {
    const files = await listFilesWithProblems(db, campaignId, afterId, FILES_PER_PAGE)
    const last = files.at(-1)
    if (!last) return
    afterId = last.id
    const withParts = await listFilesWithParts(
      db,
      files.map(({ id }) => id),
    )
    let text = ''
    for (const file of files) {
      const { name, kind, batch, fate, fault, reason, createdAt } = file
      const line = (number: number | null, problem: string) =>
        csvLine([name, kind, batch, fate, fault, number, problem, createdAt])
      // A file whose parts have problems of their own repeats some of them in its reason.
      if (!withParts.has(file.id)) text += line(null, reason ?? '')
      else {
        if (fate === 'refused') text += line(null, reason ?? '')
        for (let afterProblem = 0; ;) {
          const problems = await listProblemsOfFile(db, file.id, afterProblem, FILES_PER_PAGE)
          for (const problem of problems) text += line(problem.line, problem.sentence)
          afterProblem = problems.at(-1)?.id ?? 0
          if (problems.length < FILES_PER_PAGE) break
          yield text
          text = ''
        }
      }
    }
    if (text !== '') yield text
  }
}
