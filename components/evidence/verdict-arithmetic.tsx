import { counted, moment } from '@/components/campaigns/in-words'
import { GRADE_POINTS, isGrade } from '@/lib/science/agreement/grades'
import type { EvidenceGrade, EvidenceVerdict } from '@/lib/work/rulings/candidate-evidence'
import { whatWouldChange } from '@/lib/work/rulings/what-would-decide'
import { MeanScale } from './mean-scale'

/**
 * '3 grades: A 3, B 2, B 2; mean 2.33; spread 0.47.' The letters are left out where grades were given or corrected after the
 * verdict, so that they would not add up to it.
 */
export function arithmeticInWords(verdict: EvidenceVerdict, grades: readonly Pick<EvidenceGrade, 'grade'>[]): string {
  const given = grades.flatMap(({ grade }) => (isGrade(grade) ? [grade] : []))
  const sum = given.reduce((points, grade) => points + GRADE_POINTS[grade], 0)
  const same = given.length === verdict.grades && (given.length === 0 || sum / given.length === verdict.mean)
  const letters =
    same && given.length > 0 ? `: ${given.map((grade) => `${grade} ${GRADE_POINTS[grade]}`).join(', ')}` : ''
  const aside = verdict.cannotJudge ? ` (and ${verdict.cannotJudge} who could not judge, which is no number)` : ''
  const numbers =
    verdict.mean === null || verdict.spread === null
      ? ''
      : `; mean ${verdict.mean.toFixed(2)}; spread ${verdict.spread.toFixed(2)}`
  return `${counted(verdict.grades, 'grade')}${letters}${aside}${numbers}.`
}

export function thresholdsInWords({ rule }: EvidenceVerdict): string {
  if (rule.method === 'reliability') {
    return (
      `The rule (version ${rule.version}) weighs each grade by what its grader’s grades are worth and decides from ` +
      `${counted(rule.leastGrades, 'grade')} on, after at most ${counted(rule.mostLooks, 'look')}: ` +
      `${rule.falseConfirmed} of what is no lens may be confirmed, ${rule.missedLens} of lenses set aside.`
    )
  }
  return (
    `The rule (version ${rule.version}) decides from ${counted(rule.leastGrades, 'grade')} on: it confirms at a mean of ` +
    `${rule.confirmMean.toFixed(2)} or above, sets aside at ${rule.setAsideMean.toFixed(2)} or below, and calls a split where ` +
    `the spread (population standard deviation) is above ${rule.splitSpread.toFixed(2)}.`
  )
}

/** What the verdict is and how it comes about, so that anybody can do the sum again. */
export function VerdictArithmetic({ verdict, grades }: { verdict: EvidenceVerdict | null; grades: EvidenceGrade[] }) {
  if (!verdict) {
    return (
      <p className="text-small text-mute">
        No verdict has decided it yet. The consensus does when it runs, once the grades are enough.
      </p>
    )
  }
  const newer = grades.filter((grade) => grade.givenAt > verdict.at).length
  const changes = verdict.rule.method === 'mean' && newer === 0 ? whatWouldChange(verdict.rule, grades) : []
  return (
    <div className="flex flex-col gap-3">
      <p>{verdict.reason}</p>
      <MeanScale verdict={verdict} />
      <p className="text-small text-mute">
        <span className="text-text">{arithmeticInWords(verdict, grades)}</span> {thresholdsInWords(verdict)}
      </p>
      {changes.length > 0 ? (
        <p className="text-small text-mute">
          <span className="font-semibold text-text">
            {verdict.outcome === 'split' || verdict.outcome === 'open'
              ? 'What would decide it.'
              : 'What would change it.'}
          </span>{' '}
          {changes.join(' ')}
        </p>
      ) : null}
      <p className="text-note text-mute">
        Verdict of {moment(verdict.at)}.
        {newer > 0 ? ` ${counted(newer, 'grade')} came after it; the next consensus run takes them in.` : ''}
      </p>
    </div>
  )
}
