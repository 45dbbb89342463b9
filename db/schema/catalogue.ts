import type { Generated, Selectable } from 'kysely'
import type { StateCause } from './intake'
import type { IsoTime } from './values'

/** Given the first time a candidate enters the catalogue and kept for ever, also while it is out. */
export interface DesignationTable {
  candidate_id: number
  campaign_id: number
  designation: string
  given_at: IsoTime
}

export interface EntryTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  event: 'entered' | 'left'
  cause: StateCause
  cause_id: number
  at: IsoTime
}
export type Entry = Selectable<EntryTable>
