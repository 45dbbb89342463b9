'use client'

import { TextButton } from '@/components/ui/text-button'
import { deletePoint, type DeskState } from './desk-state'
import type { DeskStore } from './desk-store'

/** What can be done with the points, for who has neither mouse nor keys at hand. */
export function PointButtons({ desk, state }: { desk: DeskStore; state: DeskState }) {
  const { points, chosen } = state
  const tall = 'pointer-coarse:min-h-11'
  return (
    <div className="flex flex-wrap items-center gap-x-4">
      <span className="figures text-small">
        {points.length} {points.length === 1 ? 'point' : 'points'}
      </span>
      <TextButton className={tall} disabled={!desk.canUndo} onClick={() => desk.undo()}>
        Undo
      </TextButton>
      <TextButton
        className={tall}
        disabled={chosen === null}
        onClick={() => chosen !== null && desk.act(deletePoint(state, chosen))}
      >
        {chosen === null ? 'Take a point away' : `Take point ${chosen + 1} away`}
      </TextButton>
      <TextButton
        className={tall}
        disabled={points.length === 0}
        onClick={() => desk.act({ points: [], chosen: null, fit: null })}
      >
        Clear
      </TextButton>
    </div>
  )
}
