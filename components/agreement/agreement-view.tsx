import { Part } from '@/components/campaigns/overview-parts'
import { counted, moment } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { alphaInWords } from '@/components/splits/agreement-words'
import { EmptyState } from '@/components/ui/notice'
import type { AgreementReport } from '@/lib/work/reports/report-types'
import { AlertList } from './alert-list'
import { CalibrationPart } from './calibration-part'
import { CoefficientsPart } from './coefficients-part'
import { DaysPart } from './days-part'
import { GraderPanel } from './grader-panel'
import { MatrixPart } from './matrix-part'
import { ProgressPart, progressTitle } from './progress-part'
import { ReliabilityPart } from './reliability-part'
import { ScorePart } from './score-part'
import { coefficient } from './words'

interface Props {
  report: AgreementReport
  campaignPath: string
  fileName: string
  /** candidates in common below which a pair is told as little */
  leastShared: number
  /** when something is raised, a sentence each */
  alertRules: readonly string[]
  /** what the person who looks may not see */
  pseudonyms: boolean
}

/** `How reliable 3 graders are, one more left out` */
function reliabilityTitle(graders: AgreementReport['graders']): string {
  const out = graders.filter(({ leftOut }) => leftOut !== null).length
  const counting = graders.length - out
  if (counting === 0) return 'How reliable the graders are, all left out'
  const rest = out === 0 ? '' : out === 1 ? ', one more left out' : `, ${out} more left out`
  return `How reliable ${counted(counting, 'grader is', 'graders are')}${rest}`
}

function headline({ campaign }: AgreementReport): string {
  const alpha = campaign.coefficients.find(({ key }) => key === 'alpha')?.value ?? null
  if (alpha === null) return 'Nothing to compare yet'
  return `Agreement is ${alphaInWords(alpha)}: alpha ${coefficient(alpha)}`
}

export function AgreementView({ report, campaignPath, fileName, leastShared, alertRules, pseudonyms }: Props) {
  const { graders, people, alerts } = report
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={headline(report)}
        lead={
          <>
            As of {moment(report.madeAt)}. {pseudonyms ? 'People stand under their pseudonyms. ' : ''}Nothing here is a
            score of a person: it is what a referee asks of a catalogue.
          </>
        }
      />
      {people.length === 0 ? (
        <EmptyState title="No grades yet">
          <p>
            When people have graded, this page tells how far they agree, how reliable they are and when it will be done.
          </p>
        </EmptyState>
      ) : (
        <>
          {alerts.length > 0 ? (
            <Part title={`${counted(alerts.length, 'thing')} to look at`}>
              <AlertList alerts={alerts} graders={graders} rules={alertRules} />
            </Part>
          ) : null}
          <Part title={progressTitle(report.progress)}>
            <ProgressPart progress={report.progress} />
            <DaysPart days={report.days} labels={graders.map(({ label }) => label)} fileName={fileName} />
          </Part>
          <Part title="How far the graders agree">
            <CoefficientsPart campaign={report.campaign} fileName={fileName} />
            <MatrixPart pairs={report.pairs} graders={graders} leastShared={leastShared} fileName={fileName} />
          </Part>
          <Part title={reliabilityTitle(graders)}>
            <ReliabilityPart report={report} fileName={fileName} />
            <div className="border-t border-line">
              {people.map((person, at) => (
                <GraderPanel
                  key={graders[at].label}
                  grader={graders[at]}
                  report={person}
                  campaignPath={campaignPath}
                  fileName={fileName}
                />
              ))}
            </div>
          </Part>
          <div className="grid grid-cols-[minmax(0,1fr)] gap-x-12 gap-y-8 lg:grid-cols-2">
            <Part title="Whether lens probabilities hold">
              <CalibrationPart calibration={report.calibration} fileName={fileName} />
            </Part>
            <Part title="Machine search against the verdict">
              <ScorePart score={report.score} fileName={fileName} />
            </Part>
          </div>
        </>
      )}
    </div>
  )
}
