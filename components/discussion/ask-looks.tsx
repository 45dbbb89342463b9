'use client'

import { day, moment } from '@/components/campaigns/in-words'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextArea } from '@/components/ui/field'
import { TextButton } from '@/components/ui/text-button'
import { LONGEST_NOTE } from '@/lib/work/discussion/ask-input'
import type { Ask, Askable } from '@/lib/work/discussion/list-asks'

/** Looks that were asked for: who, by whom, what came of it; leads can take an open one back. */
export function AskList({ asks, withdraw }: { asks: Ask[]; withdraw: FormAction | null }) {
  const shown = asks.filter(({ state }) => state !== 'withdrawn')
  if (shown.length === 0) return null
  return (
    <ul aria-label="Looks asked for">
      {shown.map((ask) => (
        <li key={ask.id} className="flex flex-wrap items-baseline gap-x-3 border-b border-line py-1.5 text-small">
          <span className="font-semibold">{ask.of}</span>{' '}
          <span className="text-note text-mute" title={moment(ask.at)}>
            {ask.state === 'answered' ? 'has looked, asked' : 'is asked for a look'} by {ask.by}, {day(ask.at)}
          </span>
          {ask.state === 'open' && withdraw ? <Withdraw ask={ask} action={withdraw} /> : null}
          {ask.note ? (
            <span className="w-full whitespace-pre-line text-note text-mute [overflow-wrap:anywhere]">
              “{ask.note}”
            </span>
          ) : null}
        </li>
      ))}
    </ul>
  )
}

function Withdraw({ ask, action }: { ask: Ask; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="ml-auto">
      <input type="hidden" name="ask" value={ask.id} />
      <TextButton type="submit" disabled={pending} aria-label={`Withdraw the look asked of ${ask.of}`}>
        Withdraw
      </TextButton>
      {state.message ? (
        <span role="alert" className="block text-note text-alarm">
          {state.message}
        </span>
      ) : null}
    </form>
  )
}

/** Names of people to ask, each with what a lead should know first, and a note to them. */
export function AskForm({ people, action }: { people: Askable[]; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action, { emptyWhenDone: true })
  const { people: fault, note: noteFault } = state.errors ?? {}
  return (
    <form {...formProps} aria-label="Ask for another look" className="flex flex-col gap-2.5">
      <fieldset aria-invalid={fault ? true : undefined} className="flex flex-col">
        <legend className="sr-only">Whom do you ask?</legend>
        {people.map((person) => {
          const bar = barred(person)
          return (
            <label
              key={person.personId}
              className={`flex min-h-7 items-baseline gap-2 text-small ${bar ? 'text-mute' : ''}`}
            >
              <input
                type="checkbox"
                name="people"
                value={person.personId}
                disabled={bar !== null}
                className="size-3.5 translate-y-0.5 accent-lamp"
              />
              {person.name} <span className="text-note text-mute">{bar ?? knownOf(person)}</span>
            </label>
          )
        })}
      </fieldset>
      {fault ? <p className="text-note text-alarm">{fault}</p> : null}
      <TextArea
        label="Note to them"
        name="note"
        rows={2}
        maxLength={LONGEST_NOTE}
        error={noteFault}
        hint="Not what others graded: their look is worth most when it is their own."
      />
      <Button type="submit" disabled={pending} className="self-start">
        {pending ? 'Asking…' : 'Ask for a look'}
      </Button>
      {fault || noteFault ? null : <FormNote state={state} />}
    </form>
  )
}

/** Why somebody cannot be asked; null where they can. */
function barred({ asked, shown, role }: Askable): string | null {
  if (asked) return 'is asked already'
  return shown && role !== 'lead' ? 'has seen the others’ grades' : null
}

function knownOf({ grade, role, leftOut }: Askable): string {
  if (leftOut) return 'is left out of the consensus: a look would not count'
  const given = grade === null ? 'has not graded it' : grade === 'U' ? 'could not judge it' : `gave ${grade}`
  return role === 'lead' ? `lead, sees the others’ grades; ${given}` : given
}
