import 'server-only'
import type { Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import { findNewestRun } from '@/db/queries/consensus'
import {
  countJudged,
  freezeCandidates,
  insertRelease,
  listConfirmedWithoutPlace,
  newestOfCampaign,
} from '@/db/queries/release-making'
import { listReleases, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { Run } from '@/db/schema/consensus'
import { toJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { conflict, invalid, Problem } from '@/lib/platform/problems/problem'
import { cosmologyOf } from '@/lib/work/campaigns/cosmology-of'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { bringUpToDate, isUpToDate } from '@/lib/work/matching/bring-up-to-date'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { version } from '@/package.json'
import { ReleaseInput, usualCitation, type ReleaseWanted } from './release-input'

export const SOFTWARE = `Ringside ${version}`

const ATTEMPTS = 3

export interface PublishedRelease {
  id: number
  number: number
}

/**
 * A lead freezes the campaign as a release with the next number. The consensus is run and what waits is matched first, so that nothing
 * of it is out of date.
 * What is frozen is written in one short transaction; a job makes its files, and only then can it be opened to others.
 * @throws Problem 409 `release-being-made`, `being-matched`, `no-position`, `nothing-confirmed`; 422 on a release to correct that is none. ZodError.
 */
export async function publishRelease(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: ReleaseInput,
): Promise<PublishedRelease> {
  const wanted = ReleaseInput.parse(input)
  for (let attempt = 1; attempt <= ATTEMPTS; attempt++) {
    await runConsensus(db, permit)
    if (wanted.kind !== 'retraction') await bringUpToDate(db, permit.campaign.id)
    const published = await db.transaction().execute((transaction) => freeze(transaction, permit, wanted))
    if (published) return published
  }
  throw conflict(
    'runs-overlap',
    'The rule, the consensus or positions kept changing in between. Try again in a moment.',
  )
}

/** Null where a newer rule or another place of a candidate came in between. */
async function freeze(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  wanted: ReleaseWanted,
): Promise<PublishedRelease | null> {
  const run = await findNewestRun(db, campaign.id)
  const rule = await requireRule(db, campaign.id)
  if (!run || run.rule_id !== rule.id) return null
  const before = await listReleases(db, campaign.id)
  const corrected = findCorrected(before, wanted)
  await assertCanBePublished(db, campaign.id, before, wanted)
  if (wanted.kind !== 'retraction' && !(await isUpToDate(db, campaign.id))) return null
  const states = wanted.kind === 'retraction' ? [] : await countJudged(db, campaign.id)
  const now = isoTime()
  const cosmology = cosmologyOf(campaign)
  const number = (before[0]?.number ?? 0) + 1
  const newest = await newestOfCampaign(db, campaign.id)
  const id = await insertRelease(db, {
    campaign_id: campaign.id,
    number,
    kind: wanted.kind,
    corrects_id: corrected?.id ?? null,
    statement: wanted.statement,
    title: wanted.title,
    description: wanted.description,
    authors: wanted.authors,
    licence: wanted.licence,
    publisher: wanted.publisher,
    year: wanted.year,
    how_to_cite: wanted.howToCite ?? usualCitation({ ...wanted, number }),
    software: SOFTWARE,
    campaign_name: campaign.name,
    survey: campaign.survey,
    acronym: campaign.acronym,
    rule: toJson(ruleOf(rule)),
    cosmology: toJson({
      model: campaign.cosmology,
      hubbleConstant: cosmology.hubble,
      omegaMatter: cosmology.omegaMatter,
    }),
    recipe_hash: newest.recipeHash,
    ...boundsOf(run),
    newest_ruling_id: newest.ruling,
    newest_merge_id: newest.merge,
    newest_measurement_id: newest.measurement,
    candidates: states.reduce((sum, { count }) => sum + count, 0),
    entries: states.find(({ state }) => state === 'confirmed')?.count ?? 0,
    created_by: viewer.id,
    created_at: now,
  })
  if (wanted.kind !== 'retraction') await freezeCandidates(db, campaign.id, id)
  await requestReleaseFiles(db, campaign.id, id)
  await recordEvent(db, {
    personId: viewer.id,
    campaignId: campaign.id,
    action: 'releases.published',
    subject: `release ${number}`,
    detail: { release: id, kind: wanted.kind, corrects: wanted.corrects, run: run.id },
  })
  return { id, number }
}

function findCorrected(before: readonly ReleaseRow[], wanted: ReleaseWanted): ReleaseRow | null {
  if (wanted.kind === 'release') return null
  const standing = before.filter(({ givenUpReason }) => givenUpReason === null)
  const corrected = standing.find(({ number }) => number === wanted.corrects)
  if (!corrected || corrected.kind === 'retraction') {
    const reason = `There is no release ${wanted.corrects} here that could be corrected or withdrawn.`
    throw invalid(reason, [{ name: 'corrects', reason }])
  }
  const withdrawn = standing.find(({ kind, corrects_id: of }) => kind === 'retraction' && of === corrected.id)
  if (withdrawn) {
    const reason = `Release ${corrected.number} has been withdrawn already, by release ${withdrawn.number}.`
    throw invalid(reason, [{ name: 'corrects', reason }])
  }
  return corrected
}

async function assertCanBePublished(
  db: Kysely<DB>,
  campaignId: number,
  before: readonly ReleaseRow[],
  { kind, emptyIsMeant }: ReleaseWanted,
): Promise<void> {
  const unfinished = before.find(({ made, givenUpReason }) => made === 0 && givenUpReason === null)
  if (unfinished) {
    throw conflict(
      'release-being-made',
      `The files of release ${unfinished.number} are not all there. Publish the next one when they are, or give that one up if they cannot be made.`,
    )
  }
  if (kind === 'retraction') return
  const unplaced = await listConfirmedWithoutPlace(db, campaignId)
  if (unplaced.length > 0) {
    const some = unplaced.slice(0, 3).join(', ') + (unplaced.length > 3 ? ` and ${unplaced.length - 3} more` : '')
    const [are, they] = unplaced.length === 1 ? ['is', 'it has'] : ['are', 'they have']
    throw conflict(
      'no-position',
      `${some} ${are} confirmed, but ${they} no position and so no designation. Deliver a manifest with positions, or set aside ` +
        'what has none; then publish.',
    )
  }
  const states = await countJudged(db, campaignId)
  if (!states.some(({ state }) => state === 'confirmed') && !emptyIsMeant) {
    const reason =
      'Nothing is confirmed: the catalogue would have no entry. Tick that this is meant, or wait for verdicts.'
    throw new Problem(409, 'nothing-confirmed', reason, [{ name: 'emptyIsMeant', reason }])
  }
}

function boundsOf(run: Run) {
  return {
    run_id: run.id,
    newest_grade_id: run.newest_grade_id,
    newest_candidate_id: run.newest_candidate_id,
    newest_left_out_id: run.newest_left_out_id,
    newest_sheet_mark_id: run.newest_sheet_mark_id,
  }
}

/** Asks for the files, again where making them failed; what is there already is kept. */
export async function requestReleaseFiles(db: Kysely<DB>, campaignId: number, releaseId: number): Promise<void> {
  await enqueueJob(db, {
    kind: JOB.makeRelease,
    campaignId,
    uniqueKey: `${JOB.makeRelease}:${releaseId}`,
    payload: { releaseId },
  })
}
