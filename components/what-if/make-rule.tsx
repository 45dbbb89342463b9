'use client'

import { AlertDialog } from 'radix-ui'
import { useEffect, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { ruleInWords } from '@/components/campaigns/rule-in-words'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import type { RuleTrial } from '@/lib/work/consensus/try-rule'

/** Makes the tried rule the campaign's, after saying how many candidates that changes and how. */
export function MakeRule({
  rule,
  trial,
  version,
  disabled,
  action,
  onMade,
}: {
  rule: RuleInput
  trial: RuleTrial
  /** of the rule in force */
  version: number
  disabled: boolean
  action: FormAction
  /** told the sentence that says what happened */
  onMade: (sentence: string) => void
}) {
  const [open, setOpen] = useState(false)
  return (
    <AlertDialog.Root open={open} onOpenChange={setOpen}>
      <AlertDialog.Trigger asChild>
        <Button tone="lamp" disabled={disabled}>
          Make this the rule
        </Button>
      </AlertDialog.Trigger>
      <AlertDialog.Portal>
        <AlertDialog.Overlay className="fixed inset-0 z-40 bg-black/60" />
        <AlertDialog.Content className="fixed left-1/2 top-1/2 z-50 flex max-h-[calc(100dvh-2rem)] w-[min(32rem,calc(100vw-2rem))] -translate-x-1/2 -translate-y-1/2 flex-col gap-3 overflow-y-auto rounded-control border border-edge/60 bg-page p-6">
          <AlertDialog.Title className="text-title font-semibold">
            {trial.changed === 0
              ? 'Make this the rule? No candidate changes now'
              : `Make this the rule? ${counted(trial.changed, 'candidate')} ${trial.changed === 1 ? 'changes' : 'change'}`}
          </AlertDialog.Title>
          <AlertDialog.Description asChild>
            <div className="flex flex-col gap-2 text-mute">
              {trial.moves.length > 0 ? (
                <ul className="figures text-small text-text">
                  {trial.moves.map(({ from, to, rows }) => (
                    <li key={`${from} ${to}`}>
                      {rows.length.toLocaleString('en')}: {from} → {to}
                    </li>
                  ))}
                </ul>
              ) : null}
              <p>{ruleInWords(rule)}</p>
              <p>
                It is added as version {version + 1} and a consensus run applies it. Earlier versions, all grades and
                all rulings stay as they are.
              </p>
            </div>
          </AlertDialog.Description>
          <Deed rule={rule} version={version} action={action} onMade={onMade} onDone={() => setOpen(false)} />
        </AlertDialog.Content>
      </AlertDialog.Portal>
    </AlertDialog.Root>
  )
}

function Deed({
  rule,
  version,
  action,
  onMade,
  onDone,
}: {
  rule: RuleInput
  version: number
  action: FormAction
  onMade: (sentence: string) => void
  onDone: () => void
}) {
  const { state, pending, formProps } = useKeptForm(action)
  useEffect(() => {
    if (!state.done) return
    onMade(state.done)
    onDone()
  }, [state, onMade, onDone])
  return (
    <form {...formProps} className="flex flex-col gap-4">
      <input type="hidden" name="triedAgainst" value={version} />
      {Object.entries(rule).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <FormNote state={state.done ? {} : state} />
      <div className="flex flex-wrap gap-3">
        <AlertDialog.Cancel asChild>
          <Button>Leave it as it is</Button>
        </AlertDialog.Cancel>
        <Button tone="lamp" type="submit" disabled={pending}>
          {pending ? 'Saving…' : `Save as version ${version + 1}`}
        </Button>
      </div>
    </form>
  )
}
