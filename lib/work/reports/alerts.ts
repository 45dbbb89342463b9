import type { HeldCandidates } from '@/db/queries/reports'
import { alertOnAlpha, alertOnStamps } from './campaign-alerts'
import { alertOnDrift, alertOnFar, alertOnHeld, alertOnQuick, alertOnSame } from './grader-alerts'
import type { PairTables } from './pair-agreement'
import type { AgreementReport, Alert } from './report-types'

export interface AlertInput extends Pick<AgreementReport, 'campaign' | 'pairs' | 'people' | 'calibration'> {
  tables: PairTables
  /** who does not count: nothing is raised of them */
  isOut: readonly boolean[]
  personIds: readonly number[]
  held: readonly HeldCandidates[]
  /** milliseconds since 1970 */
  now: number
}

/** What a lead might want to look at, each with the numbers that raised it; the campaign first, then people in their order. */
export function raiseAlerts(input: AlertInput): Alert[] {
  const { people, isOut } = input
  const ofPeople = people.flatMap((_, grader) =>
    isOut[grader]
      ? []
      : [
          ...alertOnFar(input, grader),
          ...alertOnSame(input, grader),
          ...alertOnQuick(input, grader),
          ...alertOnDrift(input, grader),
          ...alertOnHeld(input, grader),
        ],
  )
  return [...alertOnAlpha(input.campaign), ...alertOnStamps(input), ...ofPeople]
}
