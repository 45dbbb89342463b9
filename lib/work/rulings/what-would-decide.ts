import { GRADE_POINTS, GRADES, gradesAmong, type Answer, type Grade } from '@/lib/science/agreement/grades'
import { decide, type MeanRule, type Outcome } from '@/lib/science/agreement/mean-rule'

/** More grades than this are not worth planning for. */
const MOST_GRADES = 4

/**
 * What would end a split, in sentences: the fewest further equal grades that confirm or set aside under the rule, and whether
 * one grade less would. Grades are given by people who have not seen these; the sentences are for the lead who rules.
 */
export function whatWouldDecide(rule: MeanRule, answers: readonly { grade: Answer }[]): string[] {
  const sentences: string[] = []
  const given = answers.map(({ grade }) => ({ grade }))
  const outcomeWith = (more: Grade, count: number): Outcome =>
    // Further looks are asked for by the lead, so that the number wanted grows with them.
    decide({ ...rule, gradesWanted: Math.max(rule.gradesWanted, given.length + count) }, [
      ...given,
      ...Array.from({ length: count }, () => ({ grade: more })),
    ]).outcome
  const up = fewest((count) => outcomeWith('A', count) === 'confirmed')
  const down = fewest((count) => outcomeWith('N', count) === 'set aside')
  if (up) sentences.push(`${count(up, 'more A')} would confirm it.`)
  if (down) sentences.push(`${count(down, 'more N')} would set it aside.`)
  if (!up && !down) sentences.push(`Not even ${MOST_GRADES} more equal grades would decide it: it takes a ruling.`)
  const without = outlier(given.map(({ grade }) => grade))
  if (without) {
    const rest = leaveOut(given, without)
    const { outcome, mean } = decide({ ...rule, gradesWanted: Math.max(rule.leastGrades, rest.length) }, rest)
    if (outcome === 'confirmed' || outcome === 'set aside') {
      const end = outcome === 'confirmed' ? 'confirmed' : 'set aside'
      sentences.push(`Without the ${without} it would be ${end}, with a mean of ${mean?.toFixed(2)}.`)
    }
  }
  return sentences
}

/**
 * What would have changed a verdict by the mean, in sentences. Of a split and of an open candidate: what would decide it. Of a
 * decided one: the fewest further opposite grades that undo it, and the letters that it hangs on.
 */
export function whatWouldChange(rule: MeanRule, answers: readonly { grade: Answer }[]): string[] {
  const given = answers.map(({ grade }) => ({ grade }))
  const now = decide(rule, given).outcome
  if (now === 'split' || now === 'open') return whatWouldDecide(rule, answers)
  const opposite: Grade = now === 'confirmed' ? 'N' : 'A'
  const withMore = (number: number): Outcome =>
    decide({ ...rule, gradesWanted: Math.max(rule.gradesWanted, given.length + number) }, [
      ...given,
      ...Array.from({ length: number }, () => ({ grade: opposite })),
    ]).outcome
  const undo = fewest((number) => withMore(number) !== now)
  const hangsOn = GRADES.flatMap((letter) => {
    if (!given.some(({ grade }) => grade === letter)) return []
    const { outcome } = decide(rule, leaveOut(given, letter))
    return outcome === now ? [] : [`Without ${oneOf(given, letter)} it would be ${outcome}.`]
  })
  return [
    undo
      ? `${count(undo, `more ${opposite}`)} would make it ${withMore(undo)}.`
      : `Not even ${MOST_GRADES} more ${opposite} grades would change it.`,
    ...(hangsOn.length > 0 ? hangsOn : ['No grade left out by itself would change it.']),
  ]
}

function oneOf(answers: readonly { grade: Answer }[], letter: Grade): string {
  return answers.filter(({ grade }) => grade === letter).length === 1 ? `the ${letter}` : `one ${letter}`
}

function fewest(decides: (count: number) => boolean): number | null {
  for (let number = 1; number <= MOST_GRADES; number++) if (decides(number)) return number
  return null
}

function count(number: number, what: string): string {
  const words = ['', 'One', 'Two', 'Three', 'Four']
  return `${words[number] ?? number} ${what}${number === 1 ? '' : ' grades'}`
}

/** The grade that stands alone and farthest from the mean of the others; null where two or more share its letter. */
function outlier(answers: readonly Answer[]): Grade | null {
  const grades = gradesAmong(answers)
  if (grades.length < 3) return null
  const mean = grades.reduce((sum, grade) => sum + GRADE_POINTS[grade], 0) / grades.length
  const distance = (grade: Grade) => Math.abs(GRADE_POINTS[grade] - mean)
  const farthest = GRADES.filter((grade) => grades.includes(grade)).reduce((a, b) =>
    distance(b) > distance(a) ? b : a,
  )
  return grades.filter((grade) => grade === farthest).length === 1 ? farthest : null
}

function leaveOut<T extends { grade: Answer }>(answers: readonly T[], grade: Grade): T[] {
  const index = answers.findIndex((answer) => answer.grade === grade)
  return answers.filter((_, i) => i !== index)
}
