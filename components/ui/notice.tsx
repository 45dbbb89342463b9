import type { ReactNode } from 'react'

/** A sentence that matters. `alarm` is for what went wrong (announced at once), `note` for what one should know. */
export function Notice({ tone = 'note', children }: { tone?: 'note' | 'alarm' | 'done'; children: ReactNode }) {
  const edge = { note: 'border-edge', alarm: 'border-alarm', done: 'border-lamp' }[tone]
  return (
    <div
      role={tone === 'alarm' ? 'alert' : 'status'}
      className={`rounded-control border-l-4 ${edge} bg-raise px-4 py-3 text-small`}
    >
      {children}
    </div>
  )
}

/** What a page shows when there is nothing yet: what this place is for and what to do next. */
export function EmptyState({ title, children }: { title: string; children: ReactNode }) {
  return (
    <div className="flex max-w-xl flex-col items-start gap-3 rounded-tray border border-dashed border-edge/60 px-6 py-8">
      <h2 className="text-title font-semibold">{title}</h2>
      <div className="flex flex-col items-start gap-3 text-mute">{children}</div>
    </div>
  )
}

/** Stands beside every list of candidates that may leave the house. */
export function VisualGradeCaution() {
  return (
    <p className="text-note text-mute">
      Grades are visual judgements of images. They are not spectroscopic confirmations.
    </p>
  )
}
