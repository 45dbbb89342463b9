import 'server-only'
import type { Kysely } from 'kysely'
import { deletePlanesOfFiles, listFilesOfCandidates, type FileOfCandidate } from '@/db/queries/cutouts'
import type { NewFileProblem } from '@/db/queries/file-problems'
import { setFileFates } from '@/db/queries/intake'
import { listManifestRowsOfBases } from '@/db/queries/manifests'
import { clearImaged } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import type { ManifestRow } from '@/db/schema/intake'
import { isoTime } from '@/lib/platform/clock'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { baseName } from './file-name'
import { groupBy } from './group-by'
import { rowsOfFile } from './match-name'

const FILES_PER_PAGE = 500

/**
 * Files that are imaged under one candidate while a later manifest names another: they are read again and go where it says. A
 * candidate that has been graded keeps its pixels, since the grades were given on them; that is returned in words.
 */
export async function moveNamedFiles(
  db: Kysely<DB>,
  campaignId: number,
  manifestId: number,
): Promise<NewFileProblem[]> {
  const problems: NewFileProblem[] = []
  for (let afterId = 0; ;) {
    const files = await listFilesOfCandidates(db, campaignId, afterId, FILES_PER_PAGE)
    const last = files.at(-1)
    if (!last) return problems
    afterId = last.id
    const bases = [...new Set(files.map(({ name }) => baseName(name)))]
    const byBase = groupBy(await listManifestRowsOfBases(db, campaignId, bases), (row) =>
      (row.file_base ?? '').toLowerCase(),
    )
    const moved: FileOfCandidate[] = []
    for (const file of files) {
      const row = newestNaming(file.name, byBase.get(baseName(file.name).toLowerCase()) ?? [])
      if (row?.file_id !== manifestId || row.candidate === null || row.candidate === file.candidate) continue
      if (file.gradesGiven === 0) moved.push(file)
      else problems.push({ line: row.line, sentence: stays(file, row.candidate) })
    }
    await readAgain(db, campaignId, moved)
    await giveWay()
  }
}

const newestNaming = (name: string, rows: readonly ManifestRow[]): ManifestRow | undefined =>
  rowsOfFile(name, rows)
    .filter(({ candidate }) => candidate !== null)
    .toSorted((a, b) => b.id - a.id)[0]

const stays = ({ name, candidate, gradesGiven }: FileOfCandidate, named: string): string =>
  `'${name}' is imaged as ${candidate}, which has been graded ${gradesGiven === 1 ? 'once' : `${gradesGiven} times`}, so it stays there although this line says ${named}.`

async function readAgain(db: Kysely<DB>, campaignId: number, files: readonly FileOfCandidate[]): Promise<void> {
  if (files.length === 0) return
  const ids = files.map(({ id }) => id)
  await db.transaction().execute(async (transaction) => {
    await deletePlanesOfFiles(transaction, ids)
    await clearImaged(transaction, [...new Set(files.map(({ candidateId }) => candidateId))])
    await setFileFates(transaction, ids, { fate: 'stored', fault: null, reason: null, duplicateOf: null }, isoTime())
    // What is left of those candidates is drawn anew, by a room below this one.
    const uniqueKey = `${JOB.imageCandidates}:${campaignId}:all`
    await enqueueJob(transaction, { kind: JOB.imageCandidates, campaignId, uniqueKey, payload: { campaignId } })
  })
}
