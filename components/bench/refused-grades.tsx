'use client'

import { Button } from '@/components/ui/button'
import { Notice } from '@/components/ui/notice'
import { BenchDialog } from './bench-dialog'
import type { RefusedGrade } from './grade-outbox'
import { refusedInWords } from './refused-words'

/** What the server did not take, or took in another way than meant, in words, until the person has read it. */
export function RefusedGrades({
  refused,
  onDismiss,
  onSendAgain,
  onClose,
}: {
  refused: readonly RefusedGrade[]
  onDismiss: (id: string) => void
  onSendAgain: (id: string) => void
  onClose: () => void
}) {
  return (
    <BenchDialog title={refusedInWords(refused) || 'All has been read'} onClose={onClose}>
      <div className="mt-4 flex flex-col gap-3">
        {refused.map(({ body, name, sentence, taken }) => (
          <Notice key={body.id}>
            <p>
              <b className="figures">{name}</b>, your {body.grade}: {sentence}
            </p>
            {body.remark && !taken ? <p className="mt-1 text-mute">Your remark: {body.remark}</p> : null}
            <div className="mt-1 flex flex-wrap gap-x-5">
              <button
                type="button"
                onClick={() => onDismiss(body.id)}
                className="min-h-11 underline underline-offset-4 md:min-h-7"
              >
                I have read this
              </button>
              {taken ? null : (
                <button
                  type="button"
                  onClick={() => onSendAgain(body.id)}
                  className="min-h-11 underline underline-offset-4 md:min-h-7"
                >
                  Send it again
                </button>
              )}
            </div>
          </Notice>
        ))}
      </div>
      <div className="mt-4 flex flex-wrap gap-3">
        <Button className="min-h-11" onClick={onClose}>
          Back to the bench
        </Button>
        {refused.length > 1 ? (
          <Button
            className="min-h-11"
            onClick={() => {
              for (const { body } of refused) onDismiss(body.id)
              onClose()
            }}
          >
            I have read them all
          </Button>
        ) : null}
      </div>
    </BenchDialog>
  )
}
