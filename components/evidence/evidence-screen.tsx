'use client'

import Link from 'next/link'
import { useLayoutEffect, useState, type ReactNode } from 'react'
import { useKeySwitch } from '@/components/bench/use-key-switch'
import { counted, moment } from '@/components/campaigns/in-words'
import { LIGHT_KEYS } from '@/components/light/light-keys'
import { useLight } from '@/components/light/use-light'
import { useLightKeys } from '@/components/light/use-light-keys'
import { Discussion } from '@/components/discussion/discussion'
import { AskedLooks, type Talk } from '@/components/discussion/talk'
import type { FormAction } from '@/components/people/use-kept-form'
import { useEvidenceDesk, type Measuring } from '@/components/measuring/evidence-desk'
import { KeyLine } from '@/components/splits/key-line'
import { CopyText } from '@/components/table/copy-text'
import { ButtonLink } from '@/components/ui/button'
import { Notice, VisualGradeCaution } from '@/components/ui/notice'
import { StatePill } from '@/components/ui/state-pill'
import { VoteStrip } from '@/components/ui/vote-strip'
import type { CandidateEvidence, Judgement } from '@/lib/work/rulings/candidate-evidence'
import { CandidateFacts } from './candidate-facts'
import { GradeList, gradesInWords, LateGrades } from './grade-list'
import { Position } from './position'
import { RulingForm } from './ruling-form'
import { SendOn } from './send-on'
import { RulingList, StateHistory } from './ruling-record'
import { VerdictArithmetic } from './verdict-arithmetic'
import { useViewKeys } from './use-view-keys'
import { ViewsTray } from './views-tray'
import { WhyReliability } from './why-reliability'

const EVIDENCE_KEYS = [
  { keys: ['1', '…', '9'], does: 'view' },
  ...LIGHT_KEYS,
  { keys: ['X'], does: 'hold to blink against the view before' },
]

interface Neighbour {
  id: number
  name: string
}

export interface EvidenceScreenProps {
  slug: string
  personId: number
  evidence: CandidateEvidence
  neighbours: { previous: Neighbour | null; next: Neighbour | null }
  /** null: withheld, like the judgement. */
  talk: Talk | null
  /** A look that is asked of the reader, for which the judgement is withheld. */
  asked: { by: string; note: string | null } | null
  /** For leads: rules on this candidate. */
  ruleAction: FormAction | null
  /** For leads, where the first pass did not send it on. */
  sendOnAction?: FormAction | null
  /** null: withheld, like the judgement. */
  measuring?: Measuring | null
  /** What lies at its place, where there is anything to be told: in a word beside its name, and in full. */
  place?: { label: ReactNode; full: ReactNode } | null
}

function Section({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-2.5">
      <h2 className="text-small font-semibold text-mute">{title}</h2>
      {children}
    </section>
  )
}

/** Why this one is in the catalogue or is not: everything there is about one candidate, on one page. */
export function EvidenceScreen(props: EvidenceScreenProps) {
  const { slug, personId, evidence, neighbours, talk, asked, ruleAction, sendOnAction, measuring, place } = props
  const [view, setView] = useState(0)
  const [blinking, setBlinking] = useState(false)
  const [keysOn, setKeysOn] = useKeySwitch(personId)
  const light = useLight(personId, slug)
  useLayoutEffect(() => light.show(evidence.id), [light, evidence.id])
  useLightKeys(keysOn, light, setBlinking)
  useViewKeys(keysOn, (index) => {
    if (index < evidence.pictures.views.length) setView(index)
  })
  const { judgement } = evidence
  const desk = useEvidenceDesk(measuring ?? null, evidence.pictures, light, { shown: view, onChoose: setView })
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-6 px-4 py-5 md:px-8 md:py-6">
      <Neighbours slug={slug} {...neighbours} />
      <header className="flex flex-col gap-2">
        <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
          <h1 className="figures text-display font-semibold [overflow-wrap:anywhere]">{evidence.name}</h1>
          {judgement ? <StatePill state={judgement.state} /> : null}
          {place?.label}
        </div>
        {judgement?.designation ? (
          <p className="figures">
            <CopyText text={judgement.designation} what="designation" />
            {judgement.state === 'confirmed' ? null : (
              <span className="font-sans text-note text-mute">
                {' '}
                its name while it was in the catalogue, kept for it
              </span>
            )}
          </p>
        ) : null}
        <Position raDeg={evidence.raDeg} decDeg={evidence.decDeg} />
        {judgement ? <StateReason judgement={judgement} /> : null}
      </header>
      <div
        data-desk
        className="flex scroll-mt-4 flex-col gap-8 lg:grid lg:grid-cols-[minmax(0,1fr)_22rem] lg:items-start"
      >
        <div
          className={`flex min-w-0 flex-col gap-6 ${
            desk.measuring
              ? 'sticky top-0 z-10 -my-2 bg-page py-2 max-lg:max-h-[72dvh] max-lg:overflow-y-auto max-lg:[&>:not(:first-child)]:hidden'
              : ''
          }`}
        >
          <div>
            <ViewsTray
              name={evidence.name}
              pictures={evidence.pictures}
              chosen={view}
              onChoose={setView}
              keys={keysOn}
              viewKeys
              light={light}
              blinking={blinking}
              over={desk.over}
              alone={desk.measuring}
            />
            <KeyLine on={keysOn} onSwitch={setKeysOn} keys={EVIDENCE_KEYS} />
            {desk.starts}
          </div>
          {desk.list ? <Section title="Measured on the picture">{desk.list}</Section> : null}
          {judgement?.why && judgement.verdict ? (
            <Section title={`Why the verdict is ‘${judgement.verdict.outcome}’`}>
              {judgement.verdict.reason === judgement.stateReason ? null : (
                <p className="max-w-prose">{judgement.verdict.reason}</p>
              )}
              <WhyReliability why={judgement.why} verdict={judgement.verdict} />
              <p className="text-note text-mute">Verdict of {moment(judgement.verdict.at)}.</p>
            </Section>
          ) : null}
          {place?.full}
          <CandidateFacts evidence={evidence} />
        </div>
        <div className="flex min-w-0 flex-col gap-7">
          {desk.panel}
          {judgement ? <JudgementColumn judgement={judgement} talk={talk} /> : <Withheld slug={slug} asked={asked} />}
          {sendOnAction ? (
            <Section title="Not sent on">
              <SendOn action={sendOnAction} />
            </Section>
          ) : null}
          {judgement && ruleAction ? (
            <Section title="Rule on it">
              {judgement.calibration ? (
                <Notice>This is a calibration stamp: its truth is known, so it is never ruled on.</Notice>
              ) : (
                <RulingForm
                  action={ruleAction}
                  standing={judgement.standingRuling}
                  lastRulingId={judgement.rulings[0]?.id ?? null}
                />
              )}
            </Section>
          ) : null}
        </div>
      </div>
      {talk ? (
        <section id="discussion" className="flex scroll-mt-6 flex-col gap-2.5 border-t border-line pt-5 lg:mr-[24rem]">
          <h2 className="text-small font-semibold text-mute">Discussion</h2>
          <Discussion thread={talk.thread} action={talk.post} draftKey={talk.draftKey} />
        </section>
      ) : null}
      <VisualGradeCaution />
    </div>
  )
}

function StateReason({ judgement }: { judgement: Judgement }) {
  const nameless = judgement.state === 'confirmed' && judgement.designation === null
  return (
    <div className="flex max-w-prose flex-col gap-1 text-mute">
      <p className="[overflow-wrap:anywhere]">{judgement.stateReason}</p>
      {judgement.history.length > 0 ? (
        <p className="text-note">
          {judgement.state} since {moment(judgement.stateSince)}
        </p>
      ) : null}
      {nameless ? (
        <Notice>
          It is confirmed, but has no designation yet: that takes a position, from a header or a manifest.
        </Notice>
      ) : null}
    </div>
  )
}

function JudgementColumn({ judgement, talk }: { judgement: Judgement; talk: Talk | null }) {
  return (
    <>
      <Section title={gradesInWords(judgement.grades)}>
        <VoteStrip votes={judgement.votes} />
        <GradeList grades={judgement.grades} />
        <LateGrades grades={judgement.late} />
        {talk ? <AskedLooks talk={talk} /> : null}
      </Section>
      {judgement.why ? null : (
        <Section title="The verdict and its sum">
          <VerdictArithmetic verdict={judgement.verdict} grades={judgement.grades} />
        </Section>
      )}
      <Section title={judgement.rulings.length > 0 ? counted(judgement.rulings.length, 'ruling') : 'Rulings'}>
        <RulingList rulings={judgement.rulings} standing={judgement.standingRuling} />
      </Section>
      <Section title="How its state changed">
        <StateHistory history={judgement.history} />
      </Section>
    </>
  )
}

function Withheld({ slug, asked }: { slug: string; asked: EvidenceScreenProps['asked'] }) {
  return (
    <div className="flex flex-col items-start gap-3 rounded-tray border border-dashed border-edge/60 px-5 py-6">
      <h2 className="text-title font-semibold">Your eyes first</h2>
      {asked ? (
        <p>
          <b className="font-semibold">{asked.by} asks for your look.</b>
          {asked.note ? <span className="text-mute"> “{asked.note}”</span> : null} It is the first on your bench.
        </p>
      ) : null}
      <p className="text-mute">
        {asked
          ? 'Until you have given it, the grades of others, the verdict and the discussion are withheld, so that this look is your own.'
          : 'The grades of others, the verdict, the state and the discussion are shown here once you have graded this candidate yourself, so that nobody’s judgement sways yours. ‘Cannot judge’ does not open them.'}
      </p>
      <ButtonLink tone="lamp" href={`/campaigns/${slug}/bench`}>
        To the bench
      </ButtonLink>
    </div>
  )
}

function Neighbours({ slug, previous, next }: { slug: string; previous: Neighbour | null; next: Neighbour | null }) {
  const link = (to: Neighbour, text: string) => (
    <Link
      href={`/campaigns/${slug}/candidates/${to.id}`}
      className="figures min-h-6 truncate decoration-edge underline-offset-4 hover:text-text hover:underline"
    >
      {text}
    </Link>
  )
  return (
    <nav aria-label="Candidates" className="flex items-center justify-between gap-4 text-note text-mute">
      <Link
        href={`/campaigns/${slug}/candidates`}
        className="min-h-6 whitespace-nowrap decoration-edge underline-offset-4 hover:text-text hover:underline"
      >
        All candidates
      </Link>
      <span className="flex min-w-0 gap-5">
        {previous ? link(previous, `← ${previous.name}`) : null}
        {next ? link(next, `${next.name} →`) : null}
      </span>
    </nav>
  )
}
