'use client'

import { useEffect, useReducer, useRef, useState } from 'react'
import type { GradeLetter } from '@/db/schema/grading'
import { CANNOT_JUDGE_REASONS, TAGS, type CannotJudgeReason } from '@/lib/work/grading/tags'
import type { LentQueue } from '@/lib/work/queue/lend-next'
import { RETURNED_FOCUS, type Chooser, type Command } from './bench-keys'
import {
  currentDraft,
  currentLook,
  explainable,
  openSession,
  reduceSession,
  sameAnswer,
  type Answer,
  type Look,
} from './bench-session'
import { makeUid } from './make-uid'
import type { Tool } from './measuring'
import { useBreakOffer } from './use-break-offer'
import { REMARK_ID } from './remark-box'
import { firstsIn } from './grade-outbox'
import { useOutbox } from './use-outbox'
import { usePreloaded } from './use-preloaded'
import { useSitting } from './use-sitting'
import { useSupply } from './use-supply'
import { useVisibleSeconds } from './use-visible-seconds'

/** A key that bounces, or a second press meant for the candidate before, comes faster than anybody can look. */
const LEAST_LOOK_MS = 120
/** Who types on after Enter closed the remark means more words, not a grade. */
const AFTER_WRITING_MS = 500
const HINT_MS = 2500

/** Everything the bench does, for whoever draws it. */
export function useBench(slug: string, personId: number, first: LentQueue) {
  const [session, dispatch] = useReducer(reduceSession, first, openSession)
  const [chooser, setChooser] = useState<Chooser>(null)
  const [remarkOpen, setRemarkOpen] = useState(false)
  const [sheet, setSheet] = useState<'help' | 'settings' | 'refused' | null>(null)
  const [tool, setTool] = useState<Tool | null>(null)
  const [resting, setResting] = useState(false)
  const [blinking, setBlinking] = useState(false)
  const [hint, setHint] = useState<string | null>(null)
  /** The look whose picture has been in sight. */
  const seen = useRef<string>(null)
  const broughtAt = useRef(0)
  const wroteAt = useRef(-Infinity)

  const look = resting ? null : currentLook(session)
  const candidateId = look?.candidate.id ?? null
  const lookKey = look ? `${look.candidate.id} ${look.candidate.turned ?? 0}` : null
  const recall = useRef<() => Promise<void>>(null)
  const { outbox, snapshot, latest, add } = useOutbox(slug, personId, {
    refused: ({ first: wasFirst, before, candidateId: id, body: { turned } }) => {
      if (wasFirst) dispatch({ type: 'refused', candidateId: id, turned })
      else if (before) dispatch({ type: 'correction refused', candidateId: id, turned, before })
    },
    called: (id, called) => dispatch({ type: 'called', candidateId: id, called }),
    found: (grades, where) => {
      const candidateIds = grades.map((grade) => grade.candidateId)
      if (where === 'earlier') return dispatch({ type: 'found waiting', candidateIds, firsts: firstsIn(grades) })
      const shown = grades.find((grade) => grade.candidateId === candidateId)
      if (shown) setHint(`You gave ${shown.name} its ${shown.body.grade} in another tab.`)
      dispatch({
        type: 'given elsewhere',
        grades: grades.map(({ candidateId: id, first: isFirst, body }) => ({
          candidateId: id,
          turned: body.turned,
          first: isFirst,
          answer: { grade: body.grade, tags: body.tags, remark: body.remark ?? '', reason: body.reason } as Answer,
        })),
      })
    },
    opened: () => void recall.current?.(),
  })
  useSupply({
    slug,
    personId,
    session,
    dispatch,
    outbox: latest,
    // Grades that wait for the server need not wait out their pause.
    onReached: () => latest().trouble && outbox?.flush(),
  })
  const recallSitting = useSitting({ slug, personId, session, dispatch, outbox: latest, onHint: setHint })
  useEffect(() => {
    recall.current = recallSitting
  }, [recallSitting])
  usePreloaded(session.upcoming)
  const seconds = useVisibleSeconds(candidateId)
  const { offer, decline } = useBreakOffer(session.given)

  useEffect(() => {
    broughtAt.current = performance.now()
  }, [lookKey])
  useEffect(() => {
    if (!hint) return
    const timer = setTimeout(() => setHint(null), HINT_MS)
    return () => clearTimeout(timer)
  }, [hint])

  function send({ candidate, answer, view, seconds: spent }: Look, before: Answer | null): void {
    const { grade, tags, reason } = answer
    const waiting = latest().waiting.find((one) => one.candidateId === candidate.id && one.before)
    add({
      candidateId: candidate.id,
      name: candidate.name,
      first: before === null,
      before: waiting?.before ?? before ?? undefined,
      at: Date.now(),
      body: {
        id: makeUid(),
        grade,
        tags,
        remark: answer.remark.trim() || null,
        view,
        seconds: spent,
        reason,
        recipe: candidate.recipe,
        ...(candidate.asked ? { asked: candidate.asked.id } : {}),
        ...(candidate.turned ? { turned: candidate.turned } : {}),
      },
    })
  }

  function grade(letter: GradeLetter): void {
    if (!look || !outbox || performance.now() - broughtAt.current < LEAST_LOOK_MS) return
    if (performance.now() - wroteAt.current < AFTER_WRITING_MS) {
      wroteAt.current = performance.now()
      setHint('The remark is closed: M writes on. Grade keys are heard again in a moment.')
      return
    }
    const { candidate, answer: before } = look
    const hasPicture = candidate.views.some(({ url }) => url !== null)
    if (letter !== 'U' && !(hasPicture && seen.current === lookKey)) {
      setHint(
        hasPicture ? 'The picture is still on its way. Grade it when you see it.' : 'Without a picture only U fits.',
      )
      return
    }
    const reason = letter === 'U' ? (before?.reason ?? null) : null
    const { tags, remark } = currentDraft(session)
    const given: Answer = { tags, remark, grade: letter, reason }
    const spent = { view: session.view, seconds: seconds(), at: Date.now() }
    if (!before || !sameAnswer(before, given)) send({ candidate, answer: given, ...spent }, before)
    dispatch({ type: 'graded', answer: given, ...spent })
    settle()
  }

  function settle(): void {
    // A focus that came back from the remark by itself belongs to the candidate before.
    document.querySelector<HTMLElement>(`[${RETURNED_FOCUS}]`)?.blur()
    setChooser(null)
    setRemarkOpen(false)
    setBlinking(false)
    setTool(null)
    setResting(false)
    setHint(null)
  }

  function rest(): void {
    settle()
    // Taking a break is an answer to its offer.
    if (!resting) decline()
    setResting(!resting)
  }

  function explain(reason: CannotJudgeReason): void {
    const unclear = explainable(session)
    setChooser(null)
    if (!unclear || unclear.answer.reason === reason) return
    send({ ...unclear, answer: { ...unclear.answer, reason } }, unclear.answer)
    dispatch({ type: 'explained', reason })
  }

  function undo(): void {
    if (session.given.length === 0) return setHint('Nothing has been graded in this sitting yet.')
    if (session.lookingBack === 0) return setHint('This is the first of this sitting. K keeps its grade.')
    dispatch({ type: 'went back' })
    settle()
  }

  function keep(): void {
    dispatch({ type: 'kept' })
    settle()
  }

  function chooseView(index: number): void {
    const view = look?.candidate.views[index]
    if (view) dispatch({ type: 'view chosen', key: view.key })
  }

  function stepView(step: 1 | -1): void {
    const views = look?.candidate.views ?? []
    const at = views.findIndex(({ key }) => key === session.view)
    if (views.length > 0) chooseView((at + step + views.length) % views.length)
  }

  function run(command: Command): void {
    if (command.do === 'help' || command.do === 'settings') return setSheet(sheet ? null : command.do)
    if (sheet) return
    switch (command.do) {
      case 'grade':
        return grade(command.letter)
      case 'undo':
        return undo()
      case 'keep':
        return keep()
      case 'rest':
        return rest()
      case 'measure':
        return setTool(tool === command.tool || !look ? null : command.tool)
      case 'close':
        return setChooser(null)
      case 'tags':
        return setChooser(chooser === 'tags' || !look ? null : 'tags')
      case 'reasons':
        return setChooser(chooser === 'reasons' || !explainable(session) ? null : 'reasons')
      case 'remark':
        setChooser(null)
        document.getElementById(REMARK_ID)?.focus()
        return setRemarkOpen(look !== null)
      case 'blink':
        return setBlinking(true)
      case 'view':
        return chooseView(command.index)
      case 'next view':
        return stepView(command.step)
      case 'choose': {
        const tag = TAGS[command.index]
        const reason = CANNOT_JUDGE_REASONS[command.index]
        if (chooser === 'reasons') return reason ? explain(reason) : undefined
        return tag ? dispatch({ type: 'tag toggled', tag }) : undefined
      }
    }
  }

  return {
    session,
    look,
    draft: currentDraft(session),
    shownView: blinking ? (session.previousView ?? session.view) : session.view,
    chooser,
    remarkOpen,
    sheet,
    tool,
    resting,
    offer: look ? offer : null,
    declineBreak: decline,
    hint,
    snapshot,
    run,
    explain,
    setSheet,
    leaveTool: () => setTool(null),
    setBlinking,
    closeRemark: () => {
      wroteAt.current = performance.now()
      setRemarkOpen(false)
    },
    markSeen: () => {
      seen.current = lookKey
    },
    toggleTag: (tag: (typeof TAGS)[number]) => dispatch({ type: 'tag toggled', tag }),
    writeRemark: (remark: string) => dispatch({ type: 'remark written', remark }),
    chooseView: (key: string) => dispatch({ type: 'view chosen', key }),
    dismiss: (id: string) => outbox?.dismiss(id),
    sendAgain: (id: string) => outbox?.sendAgain(id),
  }
}
