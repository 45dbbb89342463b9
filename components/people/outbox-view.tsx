import { Fragment } from 'react'
import { counted, moment } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState } from '@/components/ui/notice'
import type { Outbox } from '@/lib/work/people/outbox'
import { RetryForm } from './retry-form'
import type { FormAction } from './use-kept-form'

type Message = Outbox['mails'][number]

function standing(mail: Message): string {
  if (mail.state === 'sent') return `Sent ${moment(mail.sent_at ?? mail.created_at)}. Its secret link is not kept.`
  if (mail.state === 'kept')
    return 'Kept here: this site sends no mail. Pass the link on yourself, to this person only.'
  return mail.error ?? 'Waiting to be sent.'
}

/** Links of this site can be followed; whatever else stands in a message is text. */
function Body({ text, siteUrl }: { text: string; siteUrl: string }) {
  return (
    <p className="whitespace-pre-wrap break-words text-small">
      {text.split(/(https?:\/\/\S+)/).map((part, index) =>
        part.startsWith(`${siteUrl}/`) && !part.endsWith('…') ? (
          <a key={index} href={part} className="break-all text-lamp underline underline-offset-4">
            {part}
          </a>
        ) : (
          <Fragment key={index}>{part}</Fragment>
        ),
      )}
    </p>
  )
}

export function OutboxView({
  outbox,
  paged,
  retry,
}: {
  outbox: Outbox
  paged: boolean
  retry: (mailId: number) => FormAction
}) {
  const { mails, siteUrl, nextBefore } = outbox
  const kept = mails.filter((mail) => mail.state === 'kept').length
  const failed = mails.filter((mail) => mail.state === 'waiting' && mail.error).length
  return (
    <>
      <PageHead
        title={
          failed
            ? `${counted(failed, 'message')} could not be sent`
            : kept
              ? `${counted(kept, 'message')} to pass on`
              : 'The outbox'
        }
        lead={
          outbox.mailLeavesSite
            ? 'Every message that this site sends, newest first.'
            : 'This site has no mail server (SMTP_URL), so messages stay here. Newest first.'
        }
      />
      {mails.length === 0 ? (
        <EmptyState title={paged ? 'No older messages' : 'No messages yet'}>
          <p>When a lead invites somebody, the message appears here.</p>
        </EmptyState>
      ) : (
        <ul className="flex flex-col">
          {mails.map((mail) => (
            <li
              key={mail.id}
              className="grid gap-x-10 gap-y-3 border-t border-line py-5 lg:grid-cols-[18rem_minmax(0,1fr)]"
            >
              <div className="flex min-w-0 flex-col gap-1">
                <span className="break-all font-semibold">{mail.recipient}</span>
                <span className="figures text-note text-mute">{moment(mail.created_at)}</span>
                <span className={`text-note ${mail.error ? 'text-alarm' : 'text-mute'}`}>{standing(mail)}</span>
                {mail.error ? <RetryForm recipient={mail.recipient} action={retry(mail.id)} /> : null}
              </div>
              <article className="flex min-w-0 flex-col gap-2">
                <h2 className="text-body font-semibold">{mail.subject}</h2>
                <Body text={mail.body} siteUrl={siteUrl} />
              </article>
            </li>
          ))}
        </ul>
      )}
      {nextBefore === null ? null : (
        <ButtonLink href={`/admin/outbox?before=${nextBefore}`} className="self-start">
          Older messages
        </ButtonLink>
      )}
    </>
  )
}
