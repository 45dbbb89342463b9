import type { Generated, Selectable } from 'kysely'
import type { Flag, IsoTime } from './values'

export type Role = 'lead' | 'grader' | 'viewer'

export interface PersonTable {
  id: Generated<number>
  email: string | null
  name: string
  password_hash: string | null
  is_admin: Generated<Flag>
  /** Raised to end every session that was signed with a lower number. */
  session_epoch: Generated<number>
  created_at: IsoTime
  left_at: IsoTime | null
}
export type Person = Selectable<PersonTable>

export interface InvitationTable {
  id: Generated<number>
  campaign_id: number
  email: string
  role: Role
  token_hash: string
  invited_by: number
  created_at: IsoTime
  expires_at: IsoTime
  accepted_at: IsoTime | null
  accepted_by: number | null
  withdrawn_at: IsoTime | null
  /** The mail that carries the link. */
  mail_id: Generated<number | null>
}
export type Invitation = Selectable<InvitationTable>
