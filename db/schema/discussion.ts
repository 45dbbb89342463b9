import type { Generated, Selectable } from 'kysely'
import type { IsoTime } from './values'

/** Another look asked of a person; open until it is answered by a grade or withdrawn. */
export interface AskedLookTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  person_id: number
  asked_by: number
  note: string | null
  asked_at: IsoTime
  grade_id: number | null
  withdrawn_at: IsoTime | null
}
export type AskedLook = Selectable<AskedLookTable>

export interface MessageTable {
  id: Generated<number>
  campaign_id: number
  candidate_id: number
  person_id: number
  body: string
  created_at: IsoTime
}
export type Message = Selectable<MessageTable>

export interface MentionTable {
  message_id: number
  person_id: number
  read_at: IsoTime | null
}
