import Link from 'next/link'
import { counted, moment } from '@/components/campaigns/in-words'
import type { OpenAsk } from '@/lib/work/discussion/list-asks'

/** Looks that wait for their answer, longest first: of whom, at what, and by whom they were asked. */
export function AskedLooksList({ slug, asks }: { slug: string; asks: OpenAsk[] }) {
  if (asks.length === 0) return null
  return (
    <section className="flex flex-col gap-2" aria-labelledby="asked-looks">
      <h2 id="asked-looks" className="text-title font-semibold">
        {counted(asks.length, 'asked look')} without an answer
      </h2>
      <ul className="border-t border-line">
        {asks.map((ask) => (
          <li key={ask.id} className="flex flex-wrap items-baseline gap-x-3 border-b border-line py-2">
            <span className="font-semibold">{ask.of}</span>
            <Link
              href={`/campaigns/${slug}/candidates/${ask.candidateId}`}
              className="figures underline decoration-edge underline-offset-4 hover:decoration-text"
            >
              {ask.candidate}
            </Link>
            <span className="ml-auto text-note text-mute">
              asked by {ask.by}, {moment(ask.at)}
            </span>
          </li>
        ))}
      </ul>
    </section>
  )
}
