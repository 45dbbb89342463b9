'use client'

import { useEffect, useId, useRef, useState, type KeyboardEvent } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import type { Mentionable } from '@/lib/work/discussion/read-thread'
import { matching, mentionQuery, type MentionQuery } from './mention-query'

/**
 * Where a message is written. An @ offers the people who can be mentioned: arrows choose, Enter or Tab takes, Esc closes. What is
 * typed is kept in this tab until it is sent, also over a refusal and another page.
 */
export function Composer({
  action,
  people,
  draftKey,
}: {
  action: FormAction
  people: Mentionable[]
  /** Tells this discussion's unsent text apart. */
  draftKey: string
}) {
  const id = useId()
  const area = useRef<HTMLTextAreaElement>(null)
  const [query, setQuery] = useState<MentionQuery | null>(null)
  const [at, setAt] = useState(0)
  const send: FormAction = async (before, form) => {
    const after = await action(before, form)
    if (after.done) keepDraft(draftKey, '')
    return after
  }
  const { state, pending, formProps } = useKeptForm(send, { emptyWhenDone: true })
  useEffect(() => {
    const kept = readDraft(draftKey)
    if (area.current && kept) area.current.value = kept
  }, [draftKey])

  const offered = query ? matching(people, query.written) : []
  const open = offered.length > 0
  const chosen = Math.min(at, offered.length - 1)
  const read = () => {
    const box = area.current
    if (!box) return
    keepDraft(draftKey, box.value)
    setQuery(mentionQuery(box.value, box.selectionStart))
    setAt(0)
  }
  const take = (person: Mentionable) => {
    const box = area.current
    if (!box || !query) return
    box.setRangeText(`@${person.label} `, query.at, box.selectionStart, 'end')
    keepDraft(draftKey, box.value)
    setQuery(null)
    box.focus()
  }
  const onKeyDown = (event: KeyboardEvent<HTMLTextAreaElement>) => {
    if (event.nativeEvent.isComposing) return
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault()
      return event.currentTarget.form?.requestSubmit()
    }
    if (!open) {
      if (event.key === 'Escape') event.currentTarget.blur()
      return
    }
    const steps: Record<string, number> = { ArrowDown: 1, ArrowUp: -1 }
    if (event.key in steps) setAt((chosen + steps[event.key] + offered.length) % offered.length)
    else if (event.key === 'Enter' || event.key === 'Tab') take(offered[chosen])
    else if (event.key === 'Escape') setQuery(null)
    else return
    event.preventDefault()
  }
  const fault = state.errors?.body
  return (
    <form {...formProps} aria-label="Write a message" className="flex flex-col gap-1.5">
      <label htmlFor={id} className="sr-only">
        Message
      </label>
      <div className="relative">
        <textarea
          id={id}
          ref={area}
          name="body"
          rows={2}
          placeholder="Write to the others; @ mentions somebody"
          onChange={read}
          onClick={read}
          onKeyDown={onKeyDown}
          onBlur={() => setQuery(null)}
          aria-autocomplete="list"
          aria-controls={open ? `${id}-people` : undefined}
          aria-activedescendant={open ? `${id}-${chosen}` : undefined}
          aria-invalid={fault ? true : undefined}
          aria-describedby={`${id}-how${fault ? ` ${id}-fault` : ''}`}
          className="field-sizing-content max-h-60 min-h-16 w-full resize-none rounded-control border border-edge bg-well px-3 py-1.5 text-body text-text placeholder:text-mute aria-invalid:border-alarm"
        />
        {open ? (
          <ul
            id={`${id}-people`}
            role="listbox"
            aria-label="People to mention"
            className="absolute inset-x-0 top-full z-20 mt-1 overflow-hidden rounded-control border border-edge bg-page py-1 shadow-lg"
          >
            {offered.map((person, index) => (
              <li
                key={person.label}
                id={`${id}-${index}`}
                role="option"
                aria-selected={index === chosen}
                // The focus stays in the text.
                onMouseDown={(event) => event.preventDefault()}
                onClick={() => take(person)}
                className={`flex min-h-8 cursor-pointer items-baseline justify-between gap-3 px-3 py-1 text-small ${
                  index === chosen ? 'bg-raise' : ''
                }`}
              >
                <span className="font-semibold">{person.label}</span>
                <span className="text-right text-note text-mute">{noteOn(person)}</span>
              </li>
            ))}
          </ul>
        ) : null}
      </div>
      {fault ? (
        <p id={`${id}-fault`} className="text-note text-alarm">
          {fault}
        </p>
      ) : null}
      <div className="flex flex-wrap items-center justify-between gap-x-3 gap-y-1">
        <p id={`${id}-how`} className="text-note text-mute">
          <span className="hidden lg:inline">Ctrl and Enter send. </span>Whoever is mentioned gets a mail.
        </p>
        <Button type="submit" disabled={pending}>
          {pending ? 'Sending…' : 'Send'}
        </Button>
      </div>
      <p aria-live="polite" className="sr-only">
        {open ? `${offered.length} to mention; ${offered[chosen].label} is chosen` : ''}
      </p>
      {fault ? null : <FormNote state={state} />}
    </form>
  )
}

function noteOn({ lead, reads }: Mentionable): string {
  if (lead) return 'lead'
  return reads === false ? 'grades it first, then reads this' : ''
}

// A storage that is full or forbidden must not stop anybody from writing.
function keepDraft(key: string, text: string): void {
  try {
    if (text) sessionStorage.setItem(`ringside:message:${key}`, text)
    else sessionStorage.removeItem(`ringside:message:${key}`)
  } catch {
    return
  }
}

function readDraft(key: string): string | null {
  try {
    return sessionStorage.getItem(`ringside:message:${key}`)
  } catch {
    return null
  }
}
