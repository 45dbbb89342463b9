import 'server-only'
import type { Kysely } from 'kysely'
import { replaceFileProblems, type NewFileProblem } from '@/db/queries/file-problems'
import { setFileFates, type WaitingFile } from '@/db/queries/intake'
import { deleteManifestRows, insertManifestRows } from '@/db/queries/manifests'
import type { DB } from '@/db/schema'
import type { ManifestRow } from '@/db/schema/intake'
import { unsynced } from '@/db/unsynced'
import { isoTime } from '@/lib/platform/clock'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { moveNamedFiles } from './move-named-files'
import { unpackPart, type PackedManifest } from './pack-manifest'
import type { ManifestEntry } from './parse-manifest'
import { retellFacts } from './retell-facts'
import { tryUnmatchedAgain } from './try-again'

const PROBLEMS_TOLD = 5
const MOST_PROBLEMS = 20_000

/**
 * Keeps the lines of a parsed manifest, gives the candidates that are here already what it tells of them, and has unmatched
 * files tried again. Runs again from the start after a kill: the file stays 'stored' until all of it is done.
 */
export async function keepManifest(
  db: Kysely<DB>,
  campaignId: number,
  file: WaitingFile,
  packed: PackedManifest,
): Promise<void> {
  const { parts, lines, refusal } = packed
  const problems = packed.problems.map(problemOfLine)
  if (refusal) {
    await db.transaction().execute(async (transaction) => {
      await replaceFileProblems(transaction, file.id, [])
      await setFileFates(transaction, [file.id], { fate: 'refused', ...refusal, duplicateOf: null }, isoTime())
    })
    return
  }
  await deleteManifestRows(db, file.id)
  for (const part of parts) {
    const rows = unpackPart(part).map((entry) => rowOf(entry, campaignId, file.id))
    await unsynced(db, (connection) => insertManifestRows(connection, rows))
    await giveWay()
  }
  problems.push(...(await retellFacts(db, campaignId, file.id)))
  if (packed.namesFiles) {
    problems.push(...(await moveNamedFiles(db, campaignId, file.id)))
  }
  await db.transaction().execute(async (transaction) => {
    await replaceFileProblems(transaction, file.id, problems.slice(0, MOST_PROBLEMS))
    const to = {
      fate: 'read',
      fault: null,
      reason: manifestReason(lines, problems),
      duplicateOf: null,
    } as const
    await setFileFates(transaction, [file.id], to, isoTime())
    await tryUnmatchedAgain(transaction, campaignId)
  })
}

/** Problems of a parsed table are sentences that begin with their line. */
function problemOfLine(text: string): NewFileProblem {
  const match = /^Line (\d+): (.*)$/s.exec(text)
  return match ? { line: Number(match[1]), sentence: match[2] } : { line: null, sentence: text }
}

function manifestReason(lines: number, problems: readonly NewFileProblem[]): string {
  const counted = `${lines === 0 ? 'No' : lines.toLocaleString('en')} ${lines === 1 ? 'line' : 'lines'} taken.`
  if (problems.length === 0) return counted
  const told = problems
    .slice(0, PROBLEMS_TOLD)
    .map(({ line, sentence }) => (line === null ? sentence : `Line ${line}: ${sentence}`))
  const more = problems.length > PROBLEMS_TOLD ? ` And ${problems.length - PROBLEMS_TOLD} more.` : ''
  return `${counted} ${told.join(' ')}${more}`
}

function rowOf(entry: ManifestEntry, campaignId: number, fileId: number): Omit<ManifestRow, 'id'> {
  return {
    campaign_id: campaignId,
    file_id: fileId,
    line: entry.line,
    file_name: entry.fileName,
    file_base: entry.fileBase,
    candidate: entry.candidate,
    band: entry.band,
    ra_deg: entry.raDeg,
    dec_deg: entry.decDeg,
    pixel_scale_arcsec: entry.pixelScaleArcsec,
    score: entry.score,
    lens_redshift: entry.lensRedshift,
    source_redshift: entry.sourceRedshift,
    truth: entry.truth,
    explanation: entry.explanation,
  }
}
