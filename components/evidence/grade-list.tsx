import { counted } from '@/components/campaigns/in-words'
import type { GradeLetter } from '@/db/schema/grading'
import type { EvidenceGrade } from '@/lib/work/rulings/candidate-evidence'

export const LETTER_INK: Record<GradeLetter, string> = {
  A: 'text-letter-a',
  B: 'text-letter-b',
  C: 'text-letter-c',
  N: 'text-letter-n',
  U: 'text-mute',
}

const MEANING: Record<GradeLetter, string> = {
  A: 'sure lens',
  B: 'probable',
  C: 'possible',
  N: 'not a lens',
  U: 'cannot judge',
}

/** '3 grades', '2 grades, 1 cannot judge' */
export function gradesInWords(grades: readonly Pick<EvidenceGrade, 'grade'>[]): string {
  const aside = grades.filter(({ grade }) => grade === 'U').length
  const given = counted(grades.length - aside, 'grade')
  return aside > 0 ? `${given}, ${aside} cannot judge` : given
}

/** Grades that came too late to count. */
export function LateGrades({ grades }: { grades: EvidenceGrade[] }) {
  if (grades.length === 0) return null
  return (
    <div className="mt-3">
      <p className="mb-1 text-small text-mute">
        Came when the candidate had all its looks, as after hours without a network. Kept, and counted nowhere:
      </p>
      <GradeList grades={grades} />
    </div>
  )
}

/** Every grade that counts: who, how long they looked, what they saw and what they said. */
export function GradeList({ grades }: { grades: EvidenceGrade[] }) {
  if (grades.length === 0) return <p className="text-small text-mute">Nobody has graded it yet.</p>
  return (
    <ul className="border-t border-line">
      {grades.map((grade) => (
        <li key={grade.id} className="grid grid-cols-[1.75rem_minmax(0,1fr)_auto] gap-x-1 border-b border-line py-2">
          <span
            className={`row-span-2 text-lg font-bold leading-6 ${LETTER_INK[grade.grade]}`}
            aria-label={`${grade.grade}, ${MEANING[grade.grade]}`}
          >
            {grade.grade === 'U' ? '?' : grade.grade}
          </span>
          <span className="truncate">
            {grade.by}
            {grade.own ? <span className="text-mute"> (you)</span> : null}
            {grade.leftOut ? <span className="text-note text-mute">, left out of the consensus</span> : null}
            {grade.occasion === 'asked' ? (
              <span className="text-note text-mute">
                , asked for a look{grade.informed ? ', could see the others’ grades' : ''}
              </span>
            ) : null}
          </span>
          <span className="figures text-small text-mute">
            {grade.seconds === null
              ? ''
              : `${grade.seconds < 10 ? grade.seconds.toFixed(1) : Math.round(grade.seconds)} s`}
          </span>
          {grade.grade === 'U' || grade.tags.length > 0 || grade.remark ? (
            <p className="col-start-2 text-note text-mute [overflow-wrap:anywhere]">
              {[grade.grade === 'U' ? MEANING.U : '', ...grade.tags].filter(Boolean).join(', ')}
              {grade.remark ? <span className="block whitespace-pre-line text-text">“{grade.remark}”</span> : null}
            </p>
          ) : null}
        </li>
      ))}
    </ul>
  )
}
