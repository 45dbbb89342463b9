import { Notice } from '@/components/ui/notice'
import type { RefusedGrade } from './grade-outbox'
import { letGo } from './let-go'

/** What the server did not take, or took in another way than meant, in words, until the person has read it. */
export function RefusedGrades({
  refused,
  onDismiss,
}: {
  refused: readonly RefusedGrade[]
  onDismiss: (id: string) => void
}) {
  return refused.map(({ body, name, sentence, taken }) => (
    <Notice key={body.id} tone={taken ? 'note' : 'alarm'}>
      <p>
        <b className="figures">{name}</b>, your {body.grade}: {sentence}
      </p>
      {body.remark && !taken ? <p className="mt-1 text-mute">Your remark: {body.remark}</p> : null}
      <button
        type="button"
        onClick={letGo(() => onDismiss(body.id))}
        className="mt-1 min-h-11 underline underline-offset-4 md:min-h-7"
      >
        I have read this
      </button>
    </Notice>
  ))
}
