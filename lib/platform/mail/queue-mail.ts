import type { Kysely } from 'kysely'
import { insertMail } from '@/db/queries/mail'
import type { DB } from '@/db/schema'
import { isoTime } from '../clock'
import { config } from '../config/config'
import { enqueueJob } from '../jobs/enqueue-job'
import { JOB } from '../jobs/job-kinds'

export interface MailText {
  recipient: string
  subject: string
  body: string
}

/** A message is a row first, then a job: call it inside the transaction that gives reason for it. Returns the row's id. */
export async function queueMail(db: Kysely<DB>, mail: MailText): Promise<number> {
  const mailId = await insertMail(db, { ...mail, now: isoTime() })
  await enqueueJob(db, { kind: JOB.sendMail, uniqueKey: `${JOB.sendMail}:${mailId}`, payload: { mailId } })
  return mailId
}

/** Whether mail leaves this site, or stays in the outbox that an administrator reads. */
export function mailLeavesSite(): boolean {
  return config().smtpUrl !== undefined
}
