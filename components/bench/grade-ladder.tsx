import { useContext } from 'react'
import type { GradeLetter } from '@/db/schema/grading'
import { KeyCap } from '@/components/ui/key-cap'
import { KeyNames } from '@/components/ui/key-names'
import { CANNOT_JUDGE, RUNGS } from './grade-words'
import { letGo } from './let-go'

/** At the right a ladder, A on top; on a phone a row for the thumbs. `chosen` marks the grade that is looked back at. */
export function GradeLadder({
  chosen,
  onGrade,
}: {
  chosen: GradeLetter | null
  onGrade: (letter: GradeLetter) => void
}) {
  const keyName = useContext(KeyNames)
  const otherKey = (letter: string) => keyName !== null && ![letter, null].includes(keyName(letter))
  return (
    <div role="group" aria-labelledby="bench-question">
      <h2 id="bench-question" className="mb-2 hidden text-note font-semibold text-mute md:block short:sr-only">
        How sure are you that this is a lens?
      </h2>
      <div className="grid grid-cols-5 gap-1.5 md:flex md:flex-col md:gap-0 short:grid short:grid-cols-2 short:gap-1.5">
        {RUNGS.map(({ letter, name, means, ink, bar }) => (
          <button
            key={letter}
            type="button"
            aria-label={`${letter}: ${name}, ${means}`}
            aria-pressed={chosen === letter}
            onClick={letGo(() => onGrade(letter))}
            className={`relative flex min-h-16 touch-manipulation flex-col items-center justify-center gap-0.5 overflow-hidden rounded-control border border-line active:bg-raise md:grid md:h-[clamp(3rem,7.4vh,3.9rem)] md:min-h-0 md:grid-cols-[2.75rem_1fr] md:justify-items-start md:rounded-none md:border-x-0 md:border-b-0 md:text-left md:hover:bg-raise short:h-12 short:min-h-12 short:grid-cols-[1.75rem_1fr] short:rounded-control short:border short:px-2 ${
              chosen === letter ? 'bg-raise outline outline-lamp md:outline-0' : 'bg-raise/60 md:bg-transparent'
            }`}
          >
            <span className={`text-[1.625rem] font-bold leading-none md:pl-0.5 ${ink}`}>{letter}</span>
            <span>
              <span className="block text-[0.6875rem] leading-tight text-mute md:text-body md:text-text short:text-note">
                {name}
              </span>
              <span className="hidden text-note text-mute md:block short:hidden">{means}</span>
            </span>
            {otherKey(letter) ? (
              <span className="absolute right-4 top-1 hidden md:block">
                <KeyCap>{letter}</KeyCap>
              </span>
            ) : null}
            {chosen === letter ? (
              <span className="absolute right-4 top-1/2 hidden -translate-y-1/2 text-note text-lamp md:block">
                given
              </span>
            ) : null}
            <i
              className={`absolute inset-x-0 bottom-0 h-1.5 md:inset-x-auto md:inset-y-0 md:right-0 md:h-auto md:w-1.5 ${bar}`}
            />
          </button>
        ))}
        <button
          type="button"
          aria-label={`U: ${CANNOT_JUDGE}`}
          aria-pressed={chosen === 'U'}
          onClick={letGo(() => onGrade('U'))}
          className={`flex min-h-16 touch-manipulation flex-col items-center justify-center gap-0.5 rounded-control border border-line text-mute active:bg-raise md:min-h-11 md:flex-row md:justify-start md:gap-2 md:rounded-none md:border-x-0 md:border-b-0 md:text-small md:hover:text-text short:col-span-2 short:rounded-control short:border short:justify-center ${
            chosen === 'U' ? 'bg-raise outline outline-lamp md:outline-0' : ''
          }`}
        >
          <span className="text-[1.625rem] font-bold leading-none md:hidden">U</span>
          <span className="hidden md:block">
            <KeyCap>U</KeyCap>
          </span>
          <span className="px-2 text-center text-[0.6875rem] leading-tight md:px-0 md:text-small">{CANNOT_JUDGE}</span>
          {chosen === 'U' ? <span className="hidden text-note text-lamp md:block">given</span> : null}
        </button>
      </div>
    </div>
  )
}
