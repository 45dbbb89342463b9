import 'server-only'
import type { Insertable, Kysely } from 'kysely'
import { findLastEntry, insertReleaseEntries, listStampsToRelease, listTakenKeys } from '@/db/queries/release-making'
import type { DB } from '@/db/schema'
import type { ReleaseEntryTable } from '@/db/schema/releases'
import { fromJson, toJson } from '@/db/schema/values'
import { gradeClass } from '@/lib/work/catalogue/grade-class'
import { standingRadii, type StandingRadius } from '@/lib/work/measuring/standing-radii'
import { entryKey, freeKey } from './entry-key'
import { remarksInText } from '@/lib/work/catalogue/remarks'
import { inOneTurn } from './in-one-turn'
import { releasedCandidates, type Frozen, type ReleasedCandidate } from './read-frozen'

interface Beside {
  radius: StandingRadius | undefined
  stamps: { view: string; sha256: string }[]
}

/**
 * Adds the entries, a page a transaction, in the order of the candidates; their pictures are kept already. Where some are there already, because a process was killed,
 * it goes on behind them. `onPage` hears how many there are.
 * @throws Error where a picture is not kept: nothing names one that is not there.
 */
export async function makeEntries(
  db: Kysely<DB>,
  frozen: Frozen,
  isKept: (sha256: string) => Promise<boolean>,
  onPage: (entries: number) => Promise<void>,
): Promise<void> {
  const { release } = frozen
  const last = await findLastEntry(db, release.id)
  let rowNumber = last?.rowNumber ?? 0
  for await (const page of releasedCandidates(db, frozen)) {
    const fresh = page.filter(({ state, candidate_id: id }) => state === 'confirmed' && id > (last?.candidateId ?? 0))
    if (fresh.length === 0) continue
    const ids = fresh.map((candidate) => candidate.candidate_id)
    const upTo = release.newest_measurement_id
    const radii = await standingRadii(db, release.campaign_id, ids, { upTo })
    const pictures = { campaignId: release.campaign_id, recipeHash: release.recipe_hash }
    const stamps = new Map<number, Beside['stamps']>()
    for (const { candidateId, view, sha256 } of await listStampsToRelease(db, pictures, ids)) {
      if (!(await isKept(sha256))) throw new Error('A picture was drawn anew meanwhile. The release goes on by itself.')
      stamps.set(candidateId, [...(stamps.get(candidateId) ?? []), { view, sha256 }])
    }
    const keys = fresh.map(({ designation }) => entryKey(designation!))
    const taken = await listTakenKeys(db, release.id, keys)
    const rows = fresh.map((candidate) => {
      rowNumber += 1
      const id = candidate.candidate_id
      const beside = { radius: radii.get(id), stamps: stamps.get(id) ?? [] }
      return {
        ...entryOf(candidate, beside),
        release_id: release.id,
        row_number: rowNumber,
        entry_key: freeKey(candidate.designation!, taken),
      }
    })
    await db.transaction().execute((transaction) => insertReleaseEntries(transaction, rows))
    await onPage(rowNumber)
  }
}

type EntryRow = Omit<Insertable<ReleaseEntryTable>, 'release_id' | 'row_number' | 'entry_key'>

/** Remarks of everybody, but votes, mean, tags and class from what counts. */
function entryOf(candidate: ReleasedCandidate, { radius, stamps }: Beside): EntryRow {
  const { verdict, answers, ruled } = candidate
  const votes = { A: 0, B: 0, C: 0, N: 0, U: 0 }
  const counted = answers.filter(({ notCounted }) => notCounted === null)
  for (const { grade } of counted) votes[grade] += 1
  const remarks = answers.filter(
    ({ remark, notCounted }) => remark && (notCounted === null || notCounted === 'grader left out'),
  )
  const thumbnail = stamps.find(({ view }) => view === 'colour') ?? stamps[0]
  return {
    candidate_id: candidate.candidate_id,
    designation: candidate.designation!,
    name: candidate.name,
    ra_deg: inOneTurn(candidate.ra_deg!),
    dec_deg: candidate.dec_deg!,
    class: gradeClass(ruled ? candidate.rulingGrade : null, verdict.mean),
    mean: verdict.mean,
    spread: verdict.spread,
    probability: verdict.probability,
    votes_a: votes.A,
    votes_b: votes.B,
    votes_c: votes.C,
    votes_n: votes.N,
    cannot_judge: votes.U,
    decided_by: ruled ? 'ruling' : 'verdict',
    reason: (ruled ? candidate.rulingReason : null) ?? candidate.verdictReason,
    remarks: remarksInText(remarks) || null,
    tags: countedTags(counted.flatMap(({ tags }) => fromJson(tags))),
    known_as: candidate.known_as!,
    einstein_radius_arcsec: radius?.einsteinRadiusArcsec ?? null,
    einstein_radius_error_arcsec: radius?.errorArcsec ?? null,
    n_measured: radius?.count ?? 0,
    measurement: radius ? toJson(radius) : null,
    lens_redshift: candidate.lens_redshift,
    source_redshift: candidate.source_redshift,
    entered_at: candidate.enteredAt,
    thumbnail: thumbnail?.sha256 ?? null,
    stamps: toJson(Object.fromEntries(stamps.map(({ view, sha256 }) => [view, sha256]))),
  }
}

function countedTags(tags: readonly string[]): string | null {
  const counts = new Map<string, number>()
  for (const tag of tags) counts.set(tag, (counts.get(tag) ?? 0) + 1)
  return (
    [...counts]
      .toSorted(([a, m], [b, n]) => n - m || (a < b ? -1 : 1))
      .map(([tag, count]) => `${tag} (${count})`)
      .join('; ') || null
  )
}
