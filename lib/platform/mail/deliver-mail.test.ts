import type { Kysely } from 'kysely'
import type { ParsedMail } from 'mailparser'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { openMemoryDatabase } from '@/db/connection'
import { findMail } from '@/db/queries/mail'
import type { DB } from '@/db/schema'
import { openMailTrap, type MailTrap } from '@/tests/_support/mail-trap'
import { deliverMail, withoutTokens } from './deliver-mail'
import { queueMail } from './queue-mail'

const TOKEN = 'q3J5vXw8s0Zk1bY7nR2dT6mL9cF4hG_-aEuIoPyWxQs'
const MAIL = {
  recipient: 'dunlin@saltmarsh.test',
  subject: 'Join “North field” as a grader',
  body: `Open this:\n\nhttp://127.0.0.1:3000/invitation/${TOKEN}\n\nÀ bientôt.`,
}
let db: Kysely<DB>
let trap: MailTrap

beforeEach(async () => {
  db = await openMemoryDatabase()
  trap = await openMailTrap()
})
afterEach(async () => {
  await trap.close()
  await db.destroy()
})
const addressIn = (to: ParsedMail['to']) =>
  [to]
    .flat()
    .map((one) => one?.text)
    .join()
const settings = () => ({ smtpUrl: trap.url, mailFrom: 'Ringside <ringside@saltmarsh.test>' })

it('brings a message to the mail server whole, with its link and its accents', async () => {
  await deliverMail(db, await queueMail(db, MAIL), settings())
  expect(trap.mails).toHaveLength(1)
  const [mail] = trap.mails
  expect(addressIn(mail.to)).toBe(MAIL.recipient)
  expect(mail.from?.text).toContain('ringside@saltmarsh.test')
  expect(mail.subject).toBe(MAIL.subject)
  expect(mail.text?.trim()).toBe(MAIL.body)
})

it('forgets the secret link once the message has left', async () => {
  const id = await queueMail(db, MAIL)
  await deliverMail(db, id, settings())
  const row = await findMail(db, id)
  expect(row?.state).toBe('sent')
  expect(row?.sent_at).not.toBeNull()
  expect(row?.body).not.toContain(TOKEN)
  expect(row?.body).toContain('http://127.0.0.1:3000/invitation/…')
})

it('does not send a message twice when its job runs twice', async () => {
  const id = await queueMail(db, MAIL)
  await deliverMail(db, id, settings())
  await deliverMail(db, id, settings())
  expect(trap.mails).toHaveLength(1)
})

it('keeps a message with its link in the outbox where no mail server is set', async () => {
  const id = await queueMail(db, MAIL)
  await deliverMail(db, id, { ...settings(), smtpUrl: undefined })
  expect(trap.mails).toHaveLength(0)
  expect(await findMail(db, id)).toMatchObject({ state: 'kept', body: MAIL.body })
})

it('fails so that the job tries again, says why, and sends it when the server takes it', async () => {
  trap.refuse.add(MAIL.recipient)
  const id = await queueMail(db, MAIL)
  await expect(deliverMail(db, id, settings())).rejects.toThrow('No such mailbox')
  const waiting = await findMail(db, id)
  expect(waiting).toMatchObject({ state: 'waiting', body: MAIL.body })
  expect(waiting?.error).toContain('The mail server did not take it')
  trap.refuse.clear()
  await deliverMail(db, id, settings())
  expect(await findMail(db, id)).toMatchObject({ state: 'sent', error: null })
})

it('does not let a line break in a subject become a header', async () => {
  const id = await queueMail(db, { ...MAIL, subject: 'Join\r\nBcc: egret@saltmarsh.test' })
  await deliverMail(db, id, settings())
  expect(addressIn(trap.mails[0].to)).toBe(MAIL.recipient)
  expect(trap.mails[0].subject).toContain('Bcc')
})

it('queues one job with the row, which names the message', async () => {
  const id = await queueMail(db, MAIL)
  const jobs = await db.selectFrom('job').select(['kind', 'payload']).execute()
  expect(jobs).toEqual([{ kind: 'send-mail', payload: JSON.stringify({ mailId: id }) }])
})

it('takes a token for what it is only at the end of an address', () => {
  expect(withoutTokens('a long word aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa')).toContain('aaaa')
  expect(withoutTokens('http://x.test/campaigns/north-field')).toBe('http://x.test/campaigns/north-field')
})
