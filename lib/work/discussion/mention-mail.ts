import type { MailText } from '@/lib/platform/mail/queue-mail'

/**
 * What a person reads who is mentioned. Who may not read the discussion yet learns only that there is one: neither who wrote nor
 * what, because both would tell of the others' judgement.
 */
export function mentionMail(mention: {
  email: string
  campaignName: string
  candidate: string
  link: string
  /** null: to be graded first. */
  message: { by: string; text: string } | null
}): MailText {
  const { email, campaignName, candidate, link, message } = mention
  const opening = message
    ? [`${message.by} mentions you in the discussion of ${candidate} in the campaign “${campaignName}”:`, message.text]
    : [
        `You are mentioned in the discussion of ${candidate} in the campaign “${campaignName}”.`,
        'The discussion opens once you have graded the candidate yourself, so that nobody’s judgement sways yours.',
      ]
  return {
    recipient: email,
    subject: `You are mentioned: ${candidate}`.replace(/\s+/g, ' '),
    body: [...opening, message ? 'Answer here:' : 'The candidate:', link].join('\n\n'),
  }
}
