import type { ReactNode } from 'react'

/** A part of a long form: what it is about at the left, its fields at the right. */
export function FormSection({ title, about, children }: { title: string; about: ReactNode; children: ReactNode }) {
  return (
    <section className="grid gap-x-10 gap-y-4 border-t border-line pt-6 lg:grid-cols-[16rem_minmax(0,1fr)]">
      <div className="flex flex-col gap-1.5">
        <h2 className="text-body font-semibold">{title}</h2>
        <div className="text-small text-mute">{about}</div>
      </div>
      <div className="flex min-w-0 max-w-2xl flex-col gap-5">{children}</div>
    </section>
  )
}
