import type { MailText } from '@/lib/platform/mail/queue-mail'

/** What a person reads who is asked for a look: who asks and where, never what others have graded. */
export function askedMail(ask: {
  email: string
  askedBy: string
  campaignName: string
  candidate: string
  note: string | null
  /** Whether the person has graded it before. */
  again: boolean
  link: string
}): MailText {
  const { askedBy, campaignName, candidate, note, again, link } = ask
  return {
    recipient: ask.email,
    subject: `${askedBy} asks for your look at ${candidate}`.replace(/\s+/g, ' '),
    body: [
      `${askedBy} asks for your look at ${candidate} in the campaign “${campaignName}”.`,
      ...(note ? [`They write: “${note}”`] : []),
      again
        ? 'You have graded it before. Look afresh: your new grade counts in place of the earlier one, whichever way it goes.'
        : 'You have not graded it yet. What others made of it stays hidden until you have.',
      'It is the first on your bench:',
      link,
    ].join('\n\n'),
  }
}
