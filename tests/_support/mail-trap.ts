import type { AddressInfo } from 'node:net'
import { simpleParser, type ParsedMail } from 'mailparser'
import { SMTPServer } from 'smtp-server'

/** A mail server on 127.0.0.1 that keeps what it is sent, and refuses the recipients it is told to. */
export interface MailTrap {
  url: string
  mails: ParsedMail[]
  refuse: Set<string>
  close(): Promise<void>
}

export async function openMailTrap(): Promise<MailTrap> {
  const mails: ParsedMail[] = []
  const refuse = new Set<string>()
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS'],
    onRcptTo({ address }, _session, done) {
      done(refuse.has(address) ? new Error('550 No such mailbox') : null)
    },
    onData(stream, _session, done) {
      const parts: Buffer[] = []
      stream.on('data', (part: Buffer) => parts.push(part))
      stream.on('end', () => {
        simpleParser(Buffer.concat(parts)).then((mail) => {
          mails.push(mail)
          done()
        }, done)
      })
    },
  })
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve))
  const { port } = server.server.address() as AddressInfo
  return {
    url: `smtp://127.0.0.1:${port}`,
    mails,
    refuse,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  }
}
