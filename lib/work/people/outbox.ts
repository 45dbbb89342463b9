import 'server-only'
import type { Kysely } from 'kysely'
import { findMail, listMails } from '@/db/queries/mail'
import type { DB } from '@/db/schema'
import type { Mail } from '@/db/schema/platform'
import { config } from '@/lib/platform/config/config'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { mailLeavesSite } from '@/lib/platform/mail/queue-mail'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { forgetDeadLinks } from './forget-links'
import type { SitePermit } from './permission'

const PAGE_LENGTH = 50

export interface Outbox {
  mails: Mail[]
  /** Pass it as `before` for the next page; null at the end. */
  nextBefore: number | null
  mailLeavesSite: boolean
  /** Only links that start so are made clickable. */
  siteUrl: string
}

/** Every message of the site, newest first. */
export async function listOutbox(db: Kysely<DB>, _permit: SitePermit, before?: number): Promise<Outbox> {
  await forgetDeadLinks(db)
  const found = await listMails(db, PAGE_LENGTH + 1, before)
  const mails = found.slice(0, PAGE_LENGTH)
  const nextBefore = found.length > PAGE_LENGTH ? mails[mails.length - 1].id : null
  return { mails, nextBefore, mailLeavesSite: mailLeavesSite(), siteUrl: config().siteUrl }
}

/** Once more, for a message whose tries are used up. */
export async function retryMail(db: Kysely<DB>, _permit: SitePermit, mailId: number): Promise<void> {
  const mail = await findMail(db, mailId)
  if (!mail) throw notFound('message')
  if (mail.state !== 'waiting') throw conflict('mail-settled', 'This message is not waiting any more.')
  await enqueueJob(db, { kind: JOB.sendMail, uniqueKey: `${JOB.sendMail}:${mailId}`, payload: { mailId } })
}
