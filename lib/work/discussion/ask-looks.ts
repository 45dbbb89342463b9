import 'server-only'
import type { Kysely } from 'kysely'
import { insertAskedLook, listAskable, type AskableRow } from '@/db/queries/asked-looks'
import { findCandidate } from '@/db/queries/candidates'
import { deleteLeases } from '@/db/queries/queue'
import { findStandingRuling } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { Candidate } from '@/db/schema/intake'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { config } from '@/lib/platform/config/config'
import { queueMail } from '@/lib/platform/mail/queue-mail'
import { conflict, invalid, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { AskInput } from './ask-input'
import { askedMail } from './asked-mail'

/**
 * A lead asks people by name for another look at a candidate. It comes first on their benches, takes no place of the wanted
 * number, and their answer counts in place of an earlier grade of theirs. All are asked or none: asks, mails and audit event are
 * written together.
 * @throws Problem 404 no such candidate; 409 `calibration`, `not-imaged`, `ruled`, `asked-already`, `judgement-seen`; 422 for
 *   somebody who may not grade here.
 */
export async function askLooks(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateId: number,
  input: AskInput,
): Promise<{ asked: string[] }> {
  return db.transaction().execute(async (transaction) => {
    const candidate = await findCandidate(transaction, permit.campaign.id, candidateId)
    if (!candidate) throw notFound('candidate')
    await assertLookable(transaction, candidate)
    const askable = await listAskable(transaction, permit.campaign.id, candidateId)
    const people = input.people.map((id) => requireAskable(askable, id, candidate.name))
    for (const person of people) await askOne(transaction, permit, candidate, person, input.note)
    return { asked: people.map(({ name }) => name) }
  })
}

async function assertLookable(db: Kysely<DB>, candidate: Candidate): Promise<void> {
  const { name } = candidate
  if (candidate.truth !== null) {
    throw conflict('calibration', `${name} is a calibration stamp: its truth is known, so no look is asked for.`)
  }
  if (!candidate.imaged_at) {
    throw conflict('not-imaged', `${name} has no pictures yet, so there is nothing to look at. Ask once it has.`)
  }
  const ruling = await findStandingRuling(db, candidate.id)
  if (ruling && ruling.outcome !== 'open') {
    throw conflict('ruled', `A ruling stands on ${name}, which no grade changes. Reopen it first, then ask for a look.`)
  }
}

function requireAskable(askable: readonly AskableRow[], personId: number, candidate: string): AskableRow {
  const person = askable.find((one) => one.personId === personId)
  if (!person) {
    const reason = 'Looks are asked of graders and leads of this campaign only. Somebody chosen is none any more.'
    throw invalid(reason, [{ name: 'people', reason }])
  }
  if (person.asked) {
    throw conflict(
      'asked-already',
      `${person.name} has been asked for a look at ${candidate} already; it is still open.`,
    )
  }
  if (person.shown && person.role !== 'lead') {
    throw conflict(
      'judgement-seen',
      `${person.name} has seen the others’ grades of ${candidate}, so another look would not be independent. ` +
        'Ask somebody else, or mention them in the discussion.',
    )
  }
  return person
}

async function askOne(
  transaction: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  candidate: Candidate,
  person: AskableRow,
  note: string | null,
): Promise<void> {
  const ask = { campaignId: campaign.id, candidateId: candidate.id, personId: person.personId }
  const id = await insertAskedLook(transaction, { ...ask, askedBy: viewer.id, note, now: isoTime() })
  // An asked look keeps no place, so the place that a lease keeps goes back to the others.
  await deleteLeases(transaction, campaign.id, person.personId, [candidate.id])
  if (person.email && person.personId !== viewer.id) {
    const mail = askedMail({
      email: person.email,
      askedBy: viewer.name,
      campaignName: campaign.name,
      candidate: candidate.name,
      note,
      again: person.grade !== null,
      link: `${config().siteUrl}/campaigns/${campaign.slug}/bench`,
    })
    await queueMail(transaction, mail)
  }
  await recordEvent(transaction, {
    personId: viewer.id,
    campaignId: campaign.id,
    action: 'discussion.look-asked',
    subject: candidate.name,
    detail: { ask: id, of: person.personId },
  })
}
