import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { insertAuditEvent } from '@/db/queries/audit'
import { isoTime } from '../clock'

export interface AuditInput {
  personId: number | null
  campaignId?: number | null
  /** `room.what-happened` */
  action: string
  subject?: string
  detail?: Record<string, unknown>
}

/** Call it inside the transaction that does the thing, so that neither is there without the other. */
export async function recordEvent(db: Kysely<DB>, event: AuditInput): Promise<void> {
  await insertAuditEvent(db, { ...event, at: isoTime() })
}
