import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import { toJson } from '../schema/values'

export async function insertAuditEvent(
  db: Kysely<DB>,
  event: {
    at: string
    personId: number | null
    campaignId?: number | null
    action: string
    subject?: string
    detail?: Record<string, unknown>
  },
): Promise<void> {
  await db
    .insertInto('audit_event')
    .values({
      at: event.at,
      person_id: event.personId,
      campaign_id: event.campaignId ?? null,
      action: event.action,
      subject: event.subject ?? null,
      detail: toJson(event.detail ?? {}),
    })
    .execute()
}
