import Link from 'next/link'
import { counted, moment } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { EmptyState } from '@/components/ui/notice'
import type { Mention } from '@/lib/work/discussion/list-mentions'

/** Where the reader was mentioned, newest first; each leads to its discussion. */
export function MentionList({ slug, mentions }: { slug: string; mentions: Mention[] }) {
  const unread = mentions.filter((mention) => mention.unread).length
  const title =
    mentions.length === 0
      ? 'Nobody has mentioned you'
      : unread > 0
        ? counted(unread, 'unread mention')
        : 'No unread mentions'
  return (
    <div className="mx-auto flex max-w-3xl flex-col gap-6 px-5 py-8 md:px-10">
      <PageHead
        title={title}
        lead="Mentions in discussions of candidates. They are read once you open the discussion."
      />
      {mentions.length === 0 ? (
        <EmptyState title="Discussions are on the candidates’ pages">
          <p>Whoever writes @ and a name there reaches that person by mail and here.</p>
        </EmptyState>
      ) : (
        <ol className="border-t border-line">
          {mentions.map((mention) => (
            <li key={mention.messageId} className="border-b border-line">
              <Link
                href={`/campaigns/${slug}/candidates/${mention.candidateId}#discussion`}
                prefetch={false}
                className={`flex flex-col gap-0.5 px-3 py-2.5 hover:bg-raise/60 ${
                  mention.unread ? 'shadow-[inset_3px_0_0_var(--lamp)]' : ''
                }`}
              >
                <span className="flex flex-wrap items-baseline justify-between gap-x-3">
                  <span className="figures font-semibold">{mention.candidate}</span>
                  <span className="text-note text-mute">
                    {mention.unread ? 'unread, ' : ''}
                    {mention.message ? `${mention.message.by}, ` : ''}
                    {moment(mention.at)}
                  </span>
                </span>
                <span className="line-clamp-2 text-small text-mute [overflow-wrap:anywhere]">
                  {mention.message
                    ? mention.message.text
                    : 'The discussion opens once you have graded the candidate yourself.'}
                </span>
              </Link>
            </li>
          ))}
        </ol>
      )}
    </div>
  )
}
