import { counted, moment } from '@/components/campaigns/in-words'
import type { MessagePart } from '@/lib/work/discussion/mentions'
import type { ThreadMessage } from '@/lib/work/discussion/read-thread'

/** Words, links and mentions; text of people is never markup. */
export function MessageText({ parts }: { parts: MessagePart[] }) {
  return (
    <p className="whitespace-pre-line [overflow-wrap:anywhere]">
      {parts.map((part, index) => {
        if (part.kind === 'text') return <span key={index}>{part.text}</span>
        if (part.kind === 'link') {
          return (
            <a
              key={index}
              href={part.href}
              target="_blank"
              rel="noopener noreferrer nofollow"
              className="underline decoration-edge underline-offset-4 hover:decoration-text"
            >
              {part.href}
            </a>
          )
        }
        return (
          <span key={index} className={`font-semibold ${part.you ? 'rounded-key bg-lamp/15 px-0.5 text-lamp' : ''}`}>
            @{part.label}
            {part.you ? <span className="sr-only"> (you)</span> : null}
          </span>
        )
      })}
    </p>
  )
}

/** The messages, oldest first, so that one reads down to where one answers. */
export function MessageList({ messages }: { messages: ThreadMessage[] }) {
  if (messages.length === 0) return <p className="text-small text-mute">Nobody has written about it yet.</p>
  return (
    <ol aria-label={counted(messages.length, 'message')} className="flex flex-col gap-3">
      {messages.map((message) => (
        <li key={message.id} className={`border-l-2 pl-3 ${message.own ? 'border-edge' : 'border-line'}`}>
          <p className="text-note text-mute">
            <span className="font-semibold text-text">{message.by}</span>
            {message.own ? ' (you)' : ''}, {moment(message.at)}
          </p>
          <MessageText parts={message.parts} />
        </li>
      ))}
    </ol>
  )
}
