import type { Generated, Selectable } from 'kysely'
import type { IsoTime, Json } from './values'

export interface SiteTable {
  key: string
  value: string
}

export type JobState = 'queued' | 'running' | 'done' | 'failed'

export interface JobTable {
  id: Generated<number>
  kind: string
  campaign_id: number | null
  /** At most one queued job has it. */
  unique_key: string | null
  payload: Json<unknown>
  state: Generated<JobState>
  run_after: IsoTime
  lease_until: IsoTime | null
  /** The process that took it last. */
  holder: string | null
  attempts: Generated<number>
  done: Generated<number>
  total: Generated<number>
  error: string | null
  created_at: IsoTime
  updated_at: IsoTime
}
export type Job = Selectable<JobTable>

export interface MailTable {
  id: Generated<number>
  recipient: string
  subject: string
  body: string
  /** `kept` is a message of a site without SMTP settings: it stays in the outbox that the administrator reads. */
  state: Generated<'waiting' | 'sent' | 'kept'>
  error: string | null
  created_at: IsoTime
  sent_at: IsoTime | null
}
export type Mail = Selectable<MailTable>

export interface AuditEventTable {
  id: Generated<number>
  at: IsoTime
  person_id: number | null
  campaign_id: number | null
  /** Such as `campaign.created`; the part before the dot is the room. */
  action: string
  subject: string | null
  detail: Json<Record<string, unknown>>
}
export type AuditEvent = Selectable<AuditEventTable>
