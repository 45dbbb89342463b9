import 'server-only'
import type { Kysely } from 'kysely'
import { listStandings, writeStates, type CandidateStanding, type StateWrite } from '@/db/queries/states'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { CandidateState, StateCause } from '@/db/schema/intake'
import { giveDesignations } from './give-designations'

export interface StateOutcome {
  candidateId: number
  state: CandidateState
  /** What the state rests on from now: the standing ruling, else the newest verdict. */
  restsOn: { cause: StateCause; id: number }
  /** What made it change, where that is something else: a ruling that hands back to the verdict. */
  changedBy?: { cause: StateCause; id: number }
}

/**
 * Brings candidates into the states that verdicts or a ruling gave them: state and cause, the change's row, and the
 * catalogue (designation at the first entry, 'entered', 'left'). Call it in the transaction that appends the verdict or
 * the ruling, so that neither is there without the other. Returns how many candidates changed their state.
 */
export async function applyStates(
  db: Kysely<DB>,
  campaign: Pick<Campaign, 'id' | 'acronym'>,
  outcomes: readonly StateOutcome[],
  now: string,
): Promise<number> {
  const standings = await listStandings(
    db,
    outcomes.map((outcome) => outcome.candidateId),
  )
  return applyToStandings(db, campaign, outcomes, standings, now)
}

/** Verdicts: candidates on which a ruling stands keep their state. */
export async function applyVerdicts(
  db: Kysely<DB>,
  campaign: Pick<Campaign, 'id' | 'acronym'>,
  outcomes: readonly StateOutcome[],
  now: string,
): Promise<number> {
  const standings = await listStandings(
    db,
    outcomes.map((outcome) => outcome.candidateId),
  )
  const free = standings.filter((standing) => !standing.ruled)
  return applyToStandings(db, campaign, outcomes, free, now)
}

async function applyToStandings(
  db: Kysely<DB>,
  campaign: Pick<Campaign, 'id' | 'acronym'>,
  outcomes: readonly StateOutcome[],
  standings: readonly CandidateStanding[],
  now: string,
): Promise<number> {
  const outcomeOf = new Map(outcomes.map((outcome) => [outcome.candidateId, outcome]))
  const writes: StateWrite[] = []
  const unnamed: CandidateStanding[] = []
  for (const standing of standings) {
    const outcome = outcomeOf.get(standing.id)
    if (!outcome) continue
    writes.push({
      candidateId: standing.id,
      from: standing.state,
      to: outcome.state,
      restsOn: outcome.restsOn,
      changedBy: outcome.changedBy ?? outcome.restsOn,
    })
    if (outcome.state === 'confirmed' && standing.designation === null) unnamed.push(standing)
  }
  await giveDesignations(db, campaign, unnamed, now)
  await writeStates(db, campaign.id, writes, now)
  return writes.filter((write) => write.from !== write.to).length
}
