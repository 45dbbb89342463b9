import type { Kysely } from 'kysely'
import { insertDesignations, listTakenDesignations } from '@/db/queries/states'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import { designation } from '@/lib/science/sky/designation'

/**
 * Gives each candidate its designation, once. The truncated position pins a place to 0.01 s and 0.1 arcsec only, so that two
 * candidates of a campaign can come to the same name: the one that comes second carries the specifier (2), the next (3),
 * in order of their ids. The IAU specifications (2018, section 3) allow a specifier after the sequence, in parentheses
 * behind a blank; that it counts is our choice, because they break no ties. A name once given is never changed.
 *
 * Call it in the transaction that confirms the candidates. Those without a position are left out.
 */
export async function giveDesignations(
  db: Kysely<DB>,
  campaign: Pick<Campaign, 'id' | 'acronym'>,
  candidates: readonly { id: number; raDeg: number | null; decDeg: number | null }[],
  now: string,
): Promise<void> {
  const wanted: { candidateId: number; name: string }[] = []
  for (const { id, raDeg, decDeg } of candidates) {
    if (raDeg === null || decDeg === null) continue
    wanted.push({ candidateId: id, name: designation(campaign.acronym, raDeg, decDeg) })
  }
  if (wanted.length === 0) return
  const taken = await listTakenDesignations(
    db,
    campaign.id,
    wanted.map(({ name }) => name),
  )
  const named: { candidateId: number; designation: string }[] = []
  for (const { candidateId, name } of wanted) {
    let free = name
    for (let number = 2; taken.has(free); number++) {
      free = `${name} (${number})`
      if (!taken.has(free) && (await listTakenDesignations(db, campaign.id, [free])).size > 0) taken.add(free)
    }
    taken.add(free)
    named.push({ candidateId, designation: free })
  }
  await insertDesignations(db, campaign.id, named, now)
}
