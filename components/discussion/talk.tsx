import type { FormAction } from '@/components/people/use-kept-form'
import type { Ask, Askable } from '@/lib/work/discussion/list-asks'
import type { Thread } from '@/lib/work/discussion/read-thread'
import { AskForm, AskList } from './ask-looks'

/** What people say about a candidate, the looks asked for at it, and what the reader may do about both. */
export interface Talk {
  thread: Thread
  post: FormAction | null
  /** Tells unsent text of this reader and candidate apart. */
  draftKey: string
  asks: Ask[]
  /** For leads. */
  asking: { people: Askable[]; ask: FormAction; withdraw: FormAction } | null
}

/** Looks asked for, and for leads the form that asks for more, folded until it is wanted. */
export function AskedLooks({ talk }: { talk: Talk }) {
  const { asks, asking } = talk
  if (!asking && asks.every(({ state }) => state === 'withdrawn')) return null
  return (
    <div className="flex flex-col gap-2">
      <AskList asks={asks} withdraw={asking?.withdraw ?? null} />
      {asking ? (
        <details className="group">
          <summary className="min-h-7 text-small underline decoration-edge underline-offset-4 hover:decoration-text">
            Ask people for another look
          </summary>
          <div className="pt-2">
            <AskForm people={asking.people} action={asking.ask} />
          </div>
        </details>
      ) : null}
    </div>
  )
}
