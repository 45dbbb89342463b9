import type { ReactNode } from 'react'

/** What a page has to say in one sentence, a line below it, and what can be done about it. */
export function PageHead({ title, lead, children }: { title: string; lead?: ReactNode; children?: ReactNode }) {
  return (
    <header className="flex flex-wrap items-end justify-between gap-x-8 gap-y-4">
      <div className="flex max-w-2xl flex-col gap-1.5">
        <h1 className="text-display font-semibold text-balance">{title}</h1>
        {lead ? <div className="text-mute">{lead}</div> : null}
      </div>
      {children ? <div className="flex flex-wrap gap-3">{children}</div> : null}
    </header>
  )
}
