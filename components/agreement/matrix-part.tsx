import { MatrixPlot, type MatrixCell } from '@/components/plots/matrix-plot'
import type { GraderLabel, PairAgreement } from '@/lib/work/reports/report-types'
import { coefficient, coefficientWithInterval, percentOf } from './words'

/** Each pair of graders: weighted kappa below the diagonal, candidates in common above it. */
export function MatrixPart({
  pairs,
  graders,
  leastShared,
  fileName,
}: {
  pairs: readonly PairAgreement[]
  graders: readonly GraderLabel[]
  leastShared: number
  fileName: string
}) {
  if (pairs.length === 0) return <p className="text-mute">No two people have graded the same candidate yet.</p>
  const readingOf = ({
    first,
    second,
    shared,
    quadratic,
    quadraticInterval,
    plain,
    sameGrade,
    reason,
  }: PairAgreement) => {
    const names = `${graders[first].label} and ${graders[second].label}`
    const few = shared < leastShared ? ` Fewer than ${leastShared}: says little.` : ''
    if (quadratic === null) return `${names}: ${shared} in common. ${reason ?? ''}${few}`
    return `${names}: weighted kappa ${coefficientWithInterval(quadratic, quadraticInterval)}, plain kappa ${coefficient(plain)}, the same letter in ${percentOf(sameGrade ?? 0)} of ${shared.toLocaleString('en')} candidates in common.${few}`
  }
  const cells = pairs.flatMap((pair): MatrixCell[] => {
    const faint = pair.shared < leastShared
    const common = { faint, reading: readingOf(pair) }
    return [
      { ...common, row: pair.second, column: pair.first, value: pair.quadratic, text: coefficient(pair.quadratic) },
      { ...common, row: pair.first, column: pair.second, value: null, text: pair.shared.toLocaleString('en') },
    ]
  })
  cells.sort((a, b) => a.row - b.row || a.column - b.column)
  const known = pairs.filter(({ quadratic }) => quadratic !== null)
  return (
    <div className="flex flex-col gap-4">
      <MatrixPlot
        title="Weighted kappa of each pair"
        description={`${pairs.length} pairs of graders. ${known.length ? `Weighted kappa from ${coefficient(Math.min(...known.map(({ quadratic }) => quadratic ?? 1)))} to ${coefficient(Math.max(...known.map(({ quadratic }) => quadratic ?? 0)))}.` : ''}`}
        fileName={`${fileName}-pairs`}
        labels={graders.map(({ label }) => label)}
        corner={['Below the diagonal: Cohen’s kappa, quadratic weights', 'Above it: candidates in common']}
        cells={cells}
        table={{
          columns: [
            { name: 'Grader' },
            { name: 'With' },
            { name: 'Candidates in common', numeric: true },
            { name: 'Kappa, quadratic weights', numeric: true },
            { name: '95 % from', numeric: true },
            { name: '95 % to', numeric: true },
            { name: 'Kappa, plain', numeric: true },
            { name: 'Same letter', numeric: true },
            { name: 'Note' },
          ],
          rows: pairs.map((pair) => [
            graders[pair.first].label,
            graders[pair.second].label,
            pair.shared,
            pair.quadratic,
            pair.quadraticInterval?.low ?? null,
            pair.quadraticInterval?.high ?? null,
            pair.plain,
            pair.sameGrade,
            pair.reason ?? (pair.shared < leastShared ? `Fewer than ${leastShared} in common` : ''),
          ]),
        }}
      />
      <p className="max-w-3xl text-small text-mute">
        A against N counts nine times as much as A against B. Hatched: fewer than {leastShared} candidates in common,
        where kappa says little and no interval is given (our choice). Calibration stamps are not counted.
      </p>
    </div>
  )
}
