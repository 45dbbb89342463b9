import type { FormAction } from '@/components/people/use-kept-form'
import type { Thread } from '@/lib/work/discussion/read-thread'
import { Composer } from './composer'
import { MessageList } from './message-list'

/** What people say to each other about a candidate: kept for good, and read by those only who may see its grades. */
export function Discussion({
  thread,
  action,
  draftKey,
}: {
  thread: Thread
  action: FormAction | null
  draftKey: string
}) {
  return (
    <div className="flex flex-col gap-4">
      <MessageList messages={thread.messages} />
      {thread.mayWrite && action ? (
        <Composer key={draftKey} action={action} people={thread.mentionable} draftKey={draftKey} />
      ) : (
        <p className="text-note text-mute">Viewers read along; leads and graders write.</p>
      )}
      <p className="text-note text-mute">
        Messages stay as they are. Leads and viewers read them, graders once they have graded the candidate themselves.
      </p>
    </div>
  )
}
