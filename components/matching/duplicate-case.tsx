'use client'

import { useState, type RefObject } from 'react'
import type { FormAction } from '@/components/people/use-kept-form'
import type { DuplicateGroup } from '@/lib/work/matching/duplicates-page'
import { arcsec } from './known-label'
import { MemberCard } from './member-card'
import { ReasonForm } from './reason-form'

/** A group that is decided: which one is kept, which are the same object, and why. */
export function DuplicateCase({
  slug,
  group,
  radiusArcsec,
  kept,
  onKeep,
  keys,
  mergeAction,
  differAction,
  mergeRef,
  differRef,
}: {
  slug: string
  group: DuplicateGroup
  radiusArcsec: number
  /** Place of the member that is kept. */
  kept: number
  onKeep: (place: number) => void
  keys: boolean
  mergeAction: FormAction
  differAction: FormAction
  mergeRef: RefObject<HTMLTextAreaElement | null>
  differRef: RefObject<HTMLTextAreaElement | null>
}) {
  const { members, widestArcsec } = group
  const [left, setLeft] = useState<ReadonlySet<number>>(new Set())
  const keptOne = members[kept] ?? members[0]
  const same = members.filter(({ id }) => id !== keptOne.id && !left.has(id))
  const leaving = keptOne.state === 'confirmed' ? [] : same.filter(({ state }) => state === 'confirmed')
  const choose = (id: number, chosen: boolean) => {
    const next = new Set(left)
    if (chosen) next.delete(id)
    else next.add(id)
    setLeft(next)
  }
  return (
    <article aria-label={members.map(({ name }) => name).join(', ')} className="flex flex-col gap-5">
      <header>
        <h2 className="text-title font-semibold">
          {members.length} candidates within {arcsec(widestArcsec)}
        </h2>
        {widestArcsec > radiusArcsec ? (
          <p className="text-note text-mute">
            A chain: some are further apart than {radiusArcsec}″ and hang together only through others.
          </p>
        ) : null}
      </header>
      <fieldset className="min-w-0">
        <legend className="sr-only">Which one is kept, and which are the same object?</legend>
        <ul className="flex gap-3 overflow-x-auto pb-2" tabIndex={0} aria-label="Candidates of the group">
          {members.map((member, place) => (
            <MemberCard
              key={member.id}
              slug={slug}
              member={member}
              place={place}
              isKept={member.id === keptOne.id}
              isChosen={!left.has(member.id)}
              keys={keys}
              onKeep={() => onKeep(place)}
              onChoose={(chosen) => choose(member.id, chosen)}
            />
          ))}
        </ul>
      </fieldset>
      <div className="grid gap-x-8 gap-y-5 xl:grid-cols-2">
        <section className="flex flex-col gap-2">
          <h3 className="text-small font-semibold">The same object</h3>
          <p className="text-note text-mute">
            {same.length === 0
              ? 'Choose which of the others are the same object.'
              : `${same.map(({ name }) => name).join(', ')} ${same.length === 1 ? 'is' : 'are'} set aside by a ruling that names ${keptOne.name}. Grades stay with the candidate they were given to, and it can be parted again.`}
          </p>
          {leaving.length > 0 ? (
            <p className="text-note">
              <b className="font-semibold">Look at which one is kept:</b> {leaving.map(({ name }) => name).join(', ')}{' '}
              {leaving.length === 1 ? 'is' : 'are'} confirmed and would leave the catalogue for {keptOne.name}, which is{' '}
              {keptOne.state}.
            </p>
          ) : null}
          <ReasonForm
            label="Merge"
            action={mergeAction}
            hidden={{ kept: String(keptOne.id), merged: same.map(({ id }) => id).join(',') }}
            confirm={`Merge into ${keptOne.name}`}
            tone="lamp"
            disabled={same.length === 0}
            reasonRef={mergeRef}
          />
        </section>
        <section className="flex flex-col gap-2">
          <h3 className="text-small font-semibold">Different objects</h3>
          <p className="text-note text-mute">
            {members.length === 2 ? 'Both' : `All ${members.length}`} stay as they are, and are proposed no more until
            somebody asks for it below.
          </p>
          <ReasonForm
            label="Different"
            action={differAction}
            hidden={{ members: members.map(({ id }) => id).join(',') }}
            confirm="Different"
            reasonRef={differRef}
          />
        </section>
      </div>
    </article>
  )
}
