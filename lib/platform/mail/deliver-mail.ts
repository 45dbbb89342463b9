import nodemailer from 'nodemailer'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { findMail, setMailError, setMailKept, setMailSent } from '@/db/queries/mail'
import type { DB } from '@/db/schema'
import type { Mail } from '@/db/schema/platform'
import { isoTime } from '../clock'
import { config } from '../config/config'
import type { JobHandler } from '../jobs/run-jobs'

/** Where mail goes; without `smtpUrl` it stays in the outbox. */
export interface MailSettings {
  smtpUrl: string | undefined
  mailFrom: string
}

/**
 * A link that opens an account is a secret: once it has left with its message, the row keeps the address without it. 32
 * characters and more of the URL-safe Base64 alphabet at the end of an address are a token.
 */
export function withoutTokens(body: string): string {
  return body.replace(/(https?:\/\/\S+\/)[\w-]{32,}/g, '$1…')
}

async function sendBySmtp(mail: Mail, smtpUrl: string, from: string): Promise<void> {
  const transport = nodemailer.createTransport(smtpUrl)
  try {
    await transport.sendMail({
      from,
      to: mail.recipient,
      subject: mail.subject,
      text: mail.body,
      // A process killed between sending and noting it sends again: one identifier lets the reader's program fold the two.
      messageId: `<mail-${mail.id}-${Date.parse(mail.created_at)}@ringside>`,
      // The text comes from people: never fetch or attach anything that it names.
      disableFileAccess: true,
      disableUrlAccess: true,
    })
  } finally {
    transport.close()
  }
}

/** Sends one message, or keeps it where there is no mail server. One that has gone is not sent again. @throws when it must be tried again. */
export async function deliverMail(db: Kysely<DB>, mailId: number, settings: MailSettings): Promise<void> {
  const mail = await findMail(db, mailId)
  if (!mail || mail.state !== 'waiting') return
  if (!settings.smtpUrl) return setMailKept(db, mail.id)
  try {
    await sendBySmtp(mail, settings.smtpUrl, settings.mailFrom)
  } catch (cause) {
    const sentence = `The mail server did not take it: ${cause instanceof Error ? cause.message : String(cause)}`
    await setMailError(db, mail.id, sentence)
    throw new Error(sentence, { cause })
  }
  await setMailSent(db, mail.id, { body: withoutTokens(mail.body), now: isoTime() })
}

const Payload = z.object({ mailId: z.int() })

export const sendMailJob: JobHandler = ({ db, payload }) => deliverMail(db, Payload.parse(payload).mailId, config())
