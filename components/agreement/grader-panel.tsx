import { counted, day, percent } from '@/components/campaigns/in-words'
import { ButtonLink } from '@/components/ui/button'
import { factorInWords, weightInWords } from '@/lib/science/agreement/weight-words'
import type { GraderLabel, GraderReport } from '@/lib/work/reports/report-types'
import { DriftPlot } from './drift-plot'
import { coefficient, secondsInWords, shareInWords } from './words'

/** Since when a person's grades do not count, and why, where that may be said. */
export function LeftOutNote({ leftOut }: { leftOut: NonNullable<GraderLabel['leftOut']> }) {
  return (
    <p className="text-small text-split">
      Left out of the consensus since {day(leftOut.since)}
      {leftOut.by ? ` by ${leftOut.by}` : ''}
      {leftOut.reason ? <>, because: “{leftOut.reason}”</> : ''}. The grades stay.
    </p>
  )
}

function Figure({ name, children }: { name: string; children: string }) {
  return (
    <div className="flex flex-col">
      <dt className="text-note text-mute">{name}</dt>
      <dd>{children}</dd>
    </div>
  )
}

/** One person: what their letters are worth, how they work, and whether that changes. */
export function GraderPanel({
  grader,
  report,
  campaignPath,
  fileName,
}: {
  grader: GraderLabel
  report: GraderReport
  campaignPath: string
  fileName: string
}) {
  const { label, leftOut, ended, personId } = grader
  const { grades, cannotJudge, consistency, medianSeconds, letters } = report
  return (
    <details className="group border-b border-line">
      <summary className="flex min-h-11 flex-wrap items-center gap-x-6 gap-y-0.5 py-2 marker:text-mute">
        <span aria-hidden="true" className="text-mute transition-transform group-open:rotate-90">
          ›
        </span>
        <span className="min-w-32 font-semibold">
          {label}
          {ended ? <span className="font-normal text-mute"> (membership ended)</span> : null}
        </span>
        <span className="text-small text-mute">{counted(grades, 'grade')}</span>
        {leftOut ? <span className="text-small text-split">left out since {day(leftOut.since)}</span> : null}
      </summary>
      <div className="flex flex-col gap-5 pb-6 pl-2 pt-2 sm:pl-6">
        {leftOut ? <LeftOutNote leftOut={leftOut} /> : null}
        <dl className="grid gap-x-8 gap-y-3 text-small sm:grid-cols-2 lg:grid-cols-3">
          <Figure name="Lenses that get A or B">{shareInWords(report.lensesSeen)}</Figure>
          <Figure name="Non-lenses that get C or N">{shareInWords(report.nonLensesSeen)}</Figure>
          <Figure name="Grades of calibration stamps">{report.calibrationGrades.toLocaleString('en')}</Figure>
          <Figure name="Time of a look, median">
            {medianSeconds === null ? 'not told' : secondsInWords(medianSeconds)}
          </Figure>
          <Figure name="Cannot judge">{`${percent(cannotJudge, grades + cannotJudge)}, ${counted(cannotJudge, 'time')}`}</Figure>
          <Figure name="The same grade when shown again">
            {consistency
              ? `${shareInWords(consistency.same)} of ${counted(consistency.pairs, 'repeat')}${consistency.quadratic === null ? '' : `, weighted kappa ${coefficient(consistency.quadratic)}`}`
              : 'no repeats yet'}
          </Figure>
        </dl>
        <div className="overflow-x-auto">
          <table className="text-small">
            <caption className="pb-1 text-left text-note text-mute">What each letter of {label} is worth</caption>
            <tbody>
              {letters.map(({ grade, given, weight }) => (
                <tr key={grade} className="border-t border-line">
                  <th scope="row" className="py-1 pr-4 text-left font-semibold">
                    {grade}
                  </th>
                  <td className="figures py-1 pr-6 text-right">{given.toLocaleString('en')}</td>
                  <td className="py-1 pr-6">{weightInWords(weight)}</td>
                  <td className="py-1 text-mute">{factorInWords(weight)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
        <DriftPlot label={label} drift={report.drift} fileName={fileName} />
        {personId === null ? null : (
          <ButtonLink href={`${campaignPath}/agreement/graders/${personId}`} className="self-start">
            {leftOut ? `Count ${label}’s grades again…` : `Leave ${label} out of the consensus…`}
          </ButtonLink>
        )}
      </div>
    </details>
  )
}
