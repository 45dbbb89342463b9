import { ALERT } from './alert-thresholds'
import type { AgreementReport, Alert, CampaignAgreement } from './report-types'

export function alertOnAlpha({ coefficients, candidates }: CampaignAgreement): Alert[] {
  const alpha = coefficients.find(({ key }) => key === 'alpha')
  if (!alpha || alpha.value === null || alpha.value >= ALERT.lowAlpha || candidates < ALERT.leastCandidates) return []
  const interval = alpha.interval
    ? ` (95 % interval ${alpha.interval.low.toFixed(2)} to ${alpha.interval.high.toFixed(2)})`
    : ''
  return [
    {
      key: 'alpha-low',
      grader: null,
      title: 'The graders agree less than is commonly asked for',
      because: `Alpha is ${alpha.value.toFixed(2)}${interval} over ${candidates.toLocaleString('en')} candidates; commonly 0.67 is the least for tentative conclusions.`,
      advice:
        'Look at some splits together and agree on what each grade means. Where lenses are rare, see AC2 beside it.',
    },
  ]
}

export function alertOnStamps({ calibration }: Pick<AgreementReport, 'calibration'>): Alert[] {
  const { stamps, lensStamps } = calibration
  const others = stamps - lensStamps
  if (lensStamps >= ALERT.leastStamps && others >= ALERT.leastStamps) return []
  return [
    {
      key: 'few-stamps',
      grader: null,
      title: stamps === 0 ? 'There are no calibration stamps' : 'There are few calibration stamps',
      because: `${lensStamps} known lenses and ${others} known non-lenses are in the campaign; below ${ALERT.leastStamps} of each, reliability rests on the graders’ agreement with each other.`,
      advice: 'Mix more candidates of known truth into the queue, simulated lenses among them.',
    },
  ]
}
