'use client'

import { useEffect, useState } from 'react'
import type { OutboxSnapshot } from './grade-outbox'
import { letGo } from './let-go'
import { refusedInWords } from './refused-words'

/** A sentence is read out only when it has held for so long: each grade waits for a moment, and that is no news. */
const SETTLED_MS = 1500

const NOT_KEPT =
  'This browser keeps nothing for this site, so what waits is in this tab only: leave it open until all is saved.'

export function saveSentence({ waiting, trouble, kept }: OutboxSnapshot): string {
  const parts = [
    waiting.length === 0 ? 'All grades saved' : `${waiting.length} waiting`,
    ...(waiting.length > 0 && trouble ? [trouble.sentence, ...(trouble.signIn ? [] : ['Trying again.'])] : []),
    ...(waiting.length > 0 && !kept ? [NOT_KEPT] : []),
  ]
  if (parts.length === 1) return parts[0]
  return `${parts[0]}. ${parts.slice(1).join(' ')}`
}

/** Of fixed height, so that the picture keeps its size whatever is said. What was put aside stands behind one line. */
export function SaveLine({
  snapshot,
  slug,
  onRefused,
}: {
  snapshot: OutboxSnapshot
  slug: string
  onRefused: () => void
}) {
  const sentence = saveSentence(snapshot)
  const aside = refusedInWords(snapshot.refused)
  const alarm = snapshot.refused.some(({ taken }) => !taken)
  const trouble = snapshot.waiting.length > 0 ? snapshot.trouble : null
  const [spoken, setSpoken] = useState('')
  useEffect(() => {
    const timer = setTimeout(() => setSpoken((before) => (before || trouble ? sentence : '')), SETTLED_MS)
    return () => clearTimeout(timer)
  }, [sentence, trouble])
  return (
    <div className="flex min-h-10 min-w-0 grow flex-col justify-center text-right text-note md:min-h-[3.75rem] md:grow-0 md:justify-start md:text-left short:min-h-0">
      {/* Another sentence is another paragraph: it does not move, it is replaced. */}
      <p
        key={sentence}
        data-save-line
        title={sentence}
        className={`${trouble?.signIn || aside ? 'max-md:line-clamp-1' : 'max-md:line-clamp-2'} ${
          trouble || (snapshot.waiting.length > 0 && !snapshot.kept) ? 'text-alarm' : 'text-mute'
        }`}
      >
        {sentence}
      </p>
      {trouble?.signIn || aside ? (
        <span className="flex items-center justify-end gap-x-4 md:justify-start">
          {trouble?.signIn ? (
            // The whole page goes to sign in and comes back to the bench.
            <a
              href={`/signin?next=${encodeURIComponent(`/campaigns/${slug}/bench`)}`}
              className="inline-flex min-h-6 items-center underline underline-offset-4 md:min-h-7"
            >
              Sign in and come back here
            </a>
          ) : null}
          {aside ? (
            <button
              type="button"
              onClick={letGo(onRefused)}
              className={`inline-flex min-h-6 items-center whitespace-nowrap underline underline-offset-4 md:min-h-7 ${alarm ? 'text-alarm' : 'text-mute'}`}
            >
              {aside}
            </button>
          ) : null}
        </span>
      ) : null}
      <p role="alert" className="sr-only">
        {alarm ? `${aside}.` : ''}
      </p>
      <p aria-live="polite" className="sr-only">
        {spoken}
      </p>
    </div>
  )
}
