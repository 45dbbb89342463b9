'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useRef, useState } from 'react'
import { Notice } from '@/components/ui/notice'
import type { WaitingElsewhere } from './waiting-elsewhere'

/** On pages other than the bench: grades that wait in this browser go from here too, and are told by number. */
export function WaitingNotice({ personId, className = '' }: { personId: number; className?: string }) {
  const [now, setNow] = useState<WaitingElsewhere | null>(null)
  const [most, setMost] = useState(0)
  const router = useRouter()
  const refreshed = useRef(false)
  useEffect(() => {
    let gone = false
    let end = () => {}
    void import('./waiting-elsewhere').then(async ({ sendWaiting }) => {
      if (gone) return
      const ended = await sendWaiting(personId, (next) => {
        if (gone) return
        setNow(next)
        setMost((before) => Math.max(before, next.waiting))
      })
      if (gone) ended()
      else end = ended
    })
    return () => {
      gone = true
      end()
    }
  }, [personId])
  const waiting = now?.waiting ?? 0
  const arrived = most > 0 && waiting === 0
  useEffect(() => {
    if (!arrived || refreshed.current) return
    refreshed.current = true
    // What the page counts as left does not know of them yet.
    router.refresh()
  }, [arrived, router])
  if (!now || (most === 0 && !now.others)) return null
  return (
    <div className={className}>
      <Notice tone={waiting > 0 && now.trouble ? 'alarm' : 'note'}>
        {waiting > 0 ? (
          <p>
            {waiting === 1 ? 'One grade of yours waits' : `${waiting} grades of yours wait`} in this browser and{' '}
            {waiting === 1 ? 'is' : 'are'} sent from here. {now.trouble ?? ''}
          </p>
        ) : null}
        {arrived ? (
          <p>{most === 1 ? 'The grade that waited' : `All ${most} grades that waited`} in this browser arrived.</p>
        ) : null}
        {now.others ? (
          <p>Grades of somebody else wait in this browser. They go once that person is signed in here again.</p>
        ) : null}
      </Notice>
    </div>
  )
}
