'use client'

import Link from 'next/link'
import { useState } from 'react'
import { moment } from '@/components/campaigns/in-words'
import type { FormAction } from '@/components/people/use-kept-form'
import { TextButton } from '@/components/ui/text-button'
import type { DuplicatesPage } from '@/lib/work/matching/duplicates-page'
import { arcsec } from './known-label'
import { ReasonForm } from './reason-form'

/** What was decided, each with its reason and the way back. */
export function DecidedList({
  slug,
  page,
  partAction,
  againAction,
}: {
  slug: string
  page: Pick<DuplicatesPage, 'merged' | 'different'>
  partAction: FormAction
  againAction: FormAction
}) {
  const { merged, different } = page
  const [open, setOpen] = useState<string | null>(null)
  const name = (id: number, text: string) => (
    <Link
      href={`/campaigns/${slug}/candidates/${id}`}
      prefetch={false}
      className="figures inline-block min-h-6 underline decoration-edge underline-offset-4 hover:decoration-text"
    >
      {text}
    </Link>
  )
  return (
    <div className="grid gap-x-10 gap-y-6 border-t border-line pt-5 xl:grid-cols-2">
      <section className="flex flex-col gap-2.5">
        <h2 className="text-body font-semibold">Merged</h2>
        {merged.length === 0 ? <p className="text-small text-mute">Nothing is merged.</p> : null}
        <ul className="flex flex-col gap-3 text-small">
          {merged.map((one) => (
            <li key={one.id} className="flex flex-col gap-1.5">
              <p>
                {name(one.mergedId, one.mergedName)} into {name(one.keptId, one.keptName)}
              </p>
              <p className="whitespace-pre-line text-mute [overflow-wrap:anywhere]">
                “{one.reason}” {one.by}, {moment(one.at)}
              </p>
              {open === `part ${one.id}` ? (
                <ReasonForm
                  label={`Part ${one.mergedName} from ${one.keptName}`}
                  action={partAction}
                  hidden={{ merged: String(one.mergedId) }}
                  confirm="Part them"
                />
              ) : (
                <TextButton
                  aria-label={`Part ${one.mergedName} from ${one.keptName} again`}
                  onClick={() => setOpen(`part ${one.id}`)}
                >
                  Part them again
                </TextButton>
              )}
            </li>
          ))}
        </ul>
      </section>
      <section className="flex flex-col gap-2.5">
        <h2 className="text-body font-semibold">Different objects</h2>
        {different.length === 0 ? <p className="text-small text-mute">No pair was said to be different.</p> : null}
        <ul className="flex flex-col gap-3 text-small">
          {different.map(({ ids, names, separationArcsec, reason, at }) => (
            <li key={ids.join(' ')} className="flex flex-col gap-1.5">
              <p>
                {name(ids[0], names[0])} and {name(ids[1], names[1])}, {arcsec(separationArcsec)} apart
              </p>
              <p className="whitespace-pre-line text-mute [overflow-wrap:anywhere]">
                “{reason}” {moment(at)}
              </p>
              {open === `again ${ids.join(' ')}` ? (
                <ReasonForm
                  label={`Propose ${names.join(' and ')} again`}
                  action={againAction}
                  hidden={{ members: ids.join(',') }}
                  confirm="Propose them again"
                />
              ) : (
                <TextButton
                  aria-label={`Propose ${names.join(' and ')} again`}
                  onClick={() => setOpen(`again ${ids.join(' ')}`)}
                >
                  Propose them again
                </TextButton>
              )}
            </li>
          ))}
        </ul>
      </section>
    </div>
  )
}
