'use client'

import Link from 'next/link'
import { useState, type ReactNode } from 'react'
import { counted, moment } from '@/components/campaigns/in-words'
import { GradeList, gradesInWords } from '@/components/evidence/grade-list'
import { RulingList, StateHistory } from '@/components/evidence/ruling-record'
import type { FormAction } from '@/components/people/use-kept-form'
import { StatePill } from '@/components/ui/state-pill'
import { TextButton } from '@/components/ui/text-button'
import { VoteStrip } from '@/components/ui/vote-strip'
import type { CandidateMatches, OtherHistory } from '@/lib/work/matching/candidate-matches'
import { arcsec } from './known-label'
import { ReasonForm } from './reason-form'

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-2">
      <h2 className="text-small font-semibold text-mute">{title}</h2>
      {children}
    </section>
  )
}

/** For leads: says what the page's matches and merges are. */
export interface PlaceActions {
  decideObject: FormAction
  part: FormAction
}

/** What lies at the place of a candidate: known objects, other campaigns, near candidates, and what it was merged with. */
export function PlaceSection({
  slug,
  candidateId,
  matches,
  actions,
}: {
  slug: string
  candidateId: number
  matches: CandidateMatches
  actions: PlaceActions | null
}) {
  const { objects, elsewhere, near, merges, histories } = matches
  const home = `/campaigns/${slug}/candidates`
  return (
    <div className="flex flex-col gap-6">
      {merges.length > 0 ? (
        <Part title="Merged and parted">
          <ul className="flex flex-col gap-2.5 text-small">
            {merges.map((merge) => (
              <li key={merge.id}>
                <p>
                  {merge.event === 'parted' ? 'Parted again from ' : merge.isKept ? 'Kept for ' : 'Merged into '}
                  <CandidateLink href={`${home}/${merge.other.id}`} name={merge.other.name} />
                  {merge.event === 'merged' && merge.isKept ? ', which was merged into it' : ''}
                </p>
                <p className="whitespace-pre-line text-mute [overflow-wrap:anywhere]">
                  “{merge.reason}” {merge.by}, {moment(merge.at)}
                </p>
                {merge.holds && actions ? (
                  <Opened label={`Part it from ${merge.other.name} again`}>
                    <ReasonForm
                      label={`Part it from ${merge.other.name}`}
                      action={actions.part}
                      hidden={{ merged: String(merge.isKept ? merge.other.id : candidateId) }}
                      confirm="Part them"
                    />
                  </Opened>
                ) : null}
              </li>
            ))}
          </ul>
        </Part>
      ) : null}
      {histories.map((history) => (
        <History key={history.id} history={history} href={`${home}/${history.id}`} />
      ))}
      {objects.length > 0 ? (
        <Part title={`Known here: ${counted(objects.length, 'object')}`}>
          <ul className="flex flex-col gap-2.5 text-small">
            {objects.map((object) => (
              <KnownObject key={`${object.listId} ${object.rowNumber}`} object={object} actions={actions} />
            ))}
          </ul>
        </Part>
      ) : null}
      {near.length > 0 ? (
        <Part title="Near it in this campaign">
          <ul className="flex flex-col gap-1 text-small">
            {near.map((one) => (
              <li key={one.id} className="flex flex-wrap items-center gap-x-3">
                <CandidateLink href={`${home}/${one.id}`} name={one.name} />
                <span className="figures text-mute">{arcsec(one.separationArcsec)}</span>
                <StatePill state={one.state} />
                {one.decision === 'different' ? <span className="text-note text-mute">a different object</span> : null}
              </li>
            ))}
          </ul>
          {actions ? (
            <Link
              href={`/campaigns/${slug}/duplicates`}
              className="min-h-6 self-start text-note text-mute underline decoration-edge underline-offset-4 hover:text-text"
            >
              Merge, or say that they differ
            </Link>
          ) : null}
        </Part>
      ) : null}
      {elsewhere.length > 0 ? (
        <Part title="The same place in other campaigns">
          <ul className="flex flex-col gap-1 text-small">
            {elsewhere.map((one) => (
              <li key={one.otherId} className="flex flex-wrap items-center gap-x-3">
                <CandidateLink href={`/campaigns/${one.slug}/candidates/${one.otherId}`} name={one.name} />
                <span>{one.campaign}</span>
                <span className="figures text-mute">{arcsec(one.separationArcsec)}</span>
              </li>
            ))}
          </ul>
        </Part>
      ) : null}
    </div>
  )
}

function CandidateLink({ href, name }: { href: string; name: string }) {
  return (
    <Link
      href={href}
      prefetch={false}
      className="figures inline-block min-h-6 underline decoration-edge underline-offset-4 hover:decoration-text [overflow-wrap:anywhere]"
    >
      {name}
    </Link>
  )
}

/** A form behind a line of text. */
function Opened({ label, children }: { label: string; children: ReactNode }) {
  const [open, setOpen] = useState(false)
  return open ? children : <TextButton onClick={() => setOpen(true)}>{label}</TextButton>
}

function KnownObject({
  object,
  actions,
}: {
  object: CandidateMatches['objects'][number]
  actions: PlaceActions | null
}) {
  const differs = object.decision === 'different'
  const further = Object.entries(object.more).map(([column, value]) => `${column} ${value}`)
  return (
    <li className="flex flex-col gap-0.5">
      <p className="flex flex-wrap items-baseline gap-x-3">
        <b className={`font-semibold ${differs ? 'line-through decoration-1' : ''}`}>{object.name}</b>
        <span className="figures text-mute">{arcsec(object.separationArcsec)}</span>
        {object.redshift === null ? null : <span className="figures text-mute">z {object.redshift}</span>}
        {differs ? <span className="text-note text-mute">a different object, no label</span> : null}
      </p>
      <p className="text-note text-mute">
        {object.list}: {object.source}, {object.listDate}; its number {object.rowNumber}
        {object.keepsOutOfNew && !differs ? '. Keeps this candidate out of new lists.' : '.'}
      </p>
      {further.length > 0 ? (
        <p className="text-note text-mute [overflow-wrap:anywhere]">{further.join(' · ')}</p>
      ) : null}
      {actions ? (
        <Opened label={differs ? 'It is this one after all' : `Not ${object.name}: another object`}>
          <ReasonForm
            label={`Whether it is ${object.name}`}
            action={actions.decideObject}
            hidden={{
              list: String(object.listId),
              row: String(object.rowNumber),
              decision: differs ? 'undecided' : 'different',
            }}
            confirm={differs ? 'Bring the label back' : 'Take the label away'}
          />
        </Opened>
      ) : null}
    </li>
  )
}

/** What was made of the other one: its own grades, verdict and rulings, which are not added to this one’s. */
function History({ history, href }: { history: OtherHistory; href: string }) {
  const { name, isKept, judgement } = history
  return (
    <details className="rounded-control border border-line px-4 py-2.5">
      <summary className="text-small">
        What was made of <span className="figures">{name}</span>,{' '}
        {isKept ? 'which it was merged into' : 'which was merged into it'}
      </summary>
      <div className="mt-3 flex flex-col gap-4">
        <p className="flex flex-wrap items-center gap-x-3 text-small">
          <CandidateLink href={href} name={name} />
          <StatePill state={judgement.state} />
        </p>
        <div className="flex flex-col gap-2">
          <h3 className="text-note font-semibold text-mute">{gradesInWords(judgement.grades)}</h3>
          <VoteStrip votes={judgement.votes} />
          <GradeList grades={judgement.grades} />
        </div>
        {judgement.verdict ? <p className="text-small">{judgement.verdict.reason}</p> : null}
        <RulingList rulings={judgement.rulings} standing={judgement.standingRuling} />
        <StateHistory history={judgement.history} />
      </div>
    </details>
  )
}
