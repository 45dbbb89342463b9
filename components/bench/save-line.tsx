'use client'

import { useEffect, useState } from 'react'
import type { OutboxSnapshot } from './grade-outbox'

/** A sentence is read out only when it has held for so long: each grade waits for a moment, and that is no news. */
const SETTLED_MS = 1500

export function saveSentence({ waiting, trouble }: OutboxSnapshot): string {
  if (waiting.length === 0) return 'All grades saved'
  return trouble ? `${waiting.length} waiting. ${trouble} Trying again.` : `${waiting.length} waiting`
}

export function SaveLine({ snapshot }: { snapshot: OutboxSnapshot }) {
  const sentence = saveSentence(snapshot)
  const [spoken, setSpoken] = useState('')
  useEffect(() => {
    const timer = setTimeout(() => setSpoken((before) => (before || snapshot.trouble ? sentence : '')), SETTLED_MS)
    return () => clearTimeout(timer)
  }, [sentence, snapshot.trouble])
  return (
    <>
      <p data-save-line className={`text-note ${snapshot.trouble ? 'text-alarm' : 'text-mute'}`}>
        {sentence}
      </p>
      <p aria-live="polite" className="sr-only">
        {spoken}
      </p>
    </>
  )
}
