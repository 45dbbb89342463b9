import type { Kysely } from 'kysely'
import { KnownLabelMark } from '@/components/matching/known-label'
import { PlaceSection } from '@/components/matching/place-section'
import type { DB } from '@/db/schema'
import { candidateMatches } from '@/lib/work/matching/candidate-matches'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { decideObjectAction, partAction } from '../../duplicates/actions'

/** What lies at the candidate's place, as its page shows it; null where there is nothing, or nothing to be told. */
export async function placeOf(db: Kysely<DB>, permit: CampaignPermit<'read'>, candidateId: number) {
  const matches = await candidateMatches(db, permit, candidateId)
  if (!matches) return null
  const { objects, elsewhere, near, merges } = matches
  if ([objects, elsewhere, near, merges].every((list) => list.length === 0)) return null
  const { slug } = permit.campaign
  const actions =
    permit.role === 'lead'
      ? { decideObject: decideObjectAction.bind(null, slug, candidateId), part: partAction.bind(null, slug) }
      : null
  return {
    isMerged: merges.some(({ holds, isKept }) => holds && !isKept),
    label: <KnownLabelMark labels={objects.filter(({ decision }) => decision !== 'different')} />,
    full: <PlaceSection slug={slug} candidateId={candidateId} matches={matches} actions={actions} />,
  }
}
