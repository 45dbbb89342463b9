import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { findStandingMerge, insertDecision, insertMerge, listMergedInto } from '@/db/queries/merges'
import { findRuling, findStandingRuling } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { Candidate } from '@/db/schema/intake'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, invalid } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { requireCandidate, ruleWithin } from '@/lib/work/rulings/rule-on-candidate'
import { LONGEST_REASON, type RulingInput } from '@/lib/work/rulings/ruling-input'
import type { MergeInput } from './merge-input'

type Lead = CampaignPermit<'lead'>

/**
 * Says that candidates are one object: those merged are set aside by a ruling that names the one that is kept, all in one
 * transaction. Grades and histories stay where they are. Nothing is merged into what is merged itself, nor is what holds others.
 * @throws Problem 404; 409 `calibration`, `merged`, `kept-is-merged`, `holds-others`; 422.
 */
export async function mergeCandidates(
  db: Kysely<DB>,
  permit: Lead,
  input: MergeInput,
): Promise<{ kept: string; merged: string[] }> {
  const { kept: keptId, reason } = input
  const mergedIds = [...new Set(input.merged)]
  if (mergedIds.includes(keptId)) throw invalid('A candidate cannot be merged into itself: choose which one is kept.')
  return db.transaction().execute(async (transaction) => {
    const kept = await requireCandidate(transaction, permit, keptId)
    assertOrdinary(kept)
    const above = await findStandingMerge(transaction, keptId)
    if (above) {
      throw conflict(
        'kept-is-merged',
        `${kept.name} was itself merged into ${above.keptName}. Keep that one, or part the two first.`,
      )
    }
    const merged: string[] = []
    for (const id of mergedIds) merged.push(await mergeOne(transaction, permit, kept, id, reason))
    return { kept: kept.name, merged }
  })
}

async function mergeOne(
  db: Kysely<DB>,
  permit: Lead,
  kept: Candidate,
  mergedId: number,
  reason: string,
): Promise<string> {
  const candidate = await requireCandidate(db, permit, mergedId)
  assertOrdinary(candidate)
  const before = await findStandingMerge(db, mergedId)
  if (before) {
    throw conflict('merged', `${candidate.name} was merged into ${before.keptName} already. Part the two first.`)
  }
  const held = await listMergedInto(db, mergedId)
  if (held.length > 0) {
    const names = held.map(({ mergedName }) => mergedName).join(', ')
    throw conflict(
      'holds-others',
      `${names} was merged into ${candidate.name}. Keep ${candidate.name}, or part them first.`,
    )
  }
  const standing = await findStandingRuling(db, mergedId)
  const sentence = `The same object as ${kept.name}: merged into it. ${reason}`
  const { rulingId } = await ruleWithin(db, permit, candidate, { outcome: 'set aside', grade: null, reason: sentence })
  await note(db, permit, { kept, candidate, reason, event: 'merged', rulingId, rulingBeforeId: standing?.id ?? null })
  return candidate.name
}

/**
 * Takes a merge back: what was ruled on the merged candidate before holds again, else its verdict. The pair is proposed again until
 * somebody says that the two differ.
 * @throws Problem 404; 409 `not-merged`.
 */
export async function partCandidates(
  db: Kysely<DB>,
  permit: Lead,
  mergedId: number,
  reason: string,
): Promise<{ kept: string; merged: string }> {
  return db.transaction().execute(async (transaction) => {
    const candidate = await requireCandidate(transaction, permit, mergedId)
    const merge = await findStandingMerge(transaction, mergedId)
    if (!merge)
      throw conflict('not-merged', `${candidate.name} is not merged into another, so there is nothing to part.`)
    const kept = await findCandidate(transaction, permit.campaign.id, merge.keptId)
    if (!kept) throw new Error(`Candidate ${merge.keptId} is gone`)
    const ruling = await rulingAgain(transaction, merge, `Parted from ${kept.name} again. ${reason}`)
    const { rulingId } = await ruleWithin(transaction, permit, candidate, ruling)
    await note(transaction, permit, {
      kept,
      candidate,
      reason,
      event: 'parted',
      rulingId,
      rulingBeforeId: merge.rulingId,
    })
    return { kept: kept.name, merged: candidate.name }
  })
}

/** The ruling that stood before the merge, made again; none: by verdict. */
async function rulingAgain(
  db: Kysely<DB>,
  { rulingBeforeId }: { rulingBeforeId: number | null },
  reason: string,
): Promise<RulingInput> {
  const before = rulingBeforeId === null ? null : await findRuling(db, rulingBeforeId)
  if (!before) return { outcome: 'by verdict', grade: null, reason }
  const { outcome, grade } = before
  const quoted = `${reason} The ruling before holds again: “${before.reason}”`
  const fits = quoted.length <= LONGEST_REASON ? quoted : `${quoted.slice(0, LONGEST_REASON - 2)}…”`
  return { outcome, grade, reason: fits }
}

function assertOrdinary({ truth, name }: Candidate): void {
  if (truth === null) return
  throw conflict('calibration', `${name} is a calibration stamp: its truth is known, and it is merged with nothing.`)
}

interface Noted {
  kept: Candidate
  candidate: Candidate
  reason: string
  event: 'merged' | 'parted'
  rulingId: number
  rulingBeforeId: number | null
}

async function note(db: Kysely<DB>, permit: Lead, { kept, candidate, reason, event, rulingId, rulingBeforeId }: Noted) {
  const { viewer, campaign } = permit
  const now = isoTime()
  await insertMerge(db, {
    campaign_id: campaign.id,
    kept_id: kept.id,
    merged_id: candidate.id,
    event,
    reason,
    person_id: viewer.id,
    ruling_id: rulingId,
    ruling_before_id: rulingBeforeId,
    created_at: now,
  })
  await insertDecision(db, {
    campaignId: campaign.id,
    candidateId: candidate.id,
    about: { otherId: kept.id },
    decision: event === 'merged' ? 'same' : 'undecided',
    reason,
    personId: viewer.id,
    now,
  })
  await recordEvent(db, {
    personId: viewer.id,
    campaignId: campaign.id,
    action: `matching.${event}`,
    subject: candidate.name,
    detail: { kept: kept.id, merged: candidate.id, ruling: rulingId },
  })
}
