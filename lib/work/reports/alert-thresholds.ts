/**
 * When something is raised. All but the first are our choice, no source: they raise a question and decide nothing.
 */
export const ALERT = {
  /** Krippendorff (2004, section 11.4.2, from memory): below it not even tentative conclusions. */
  lowAlpha: 0.667,
  /** an alpha over fewer candidates may be chance */
  leastCandidates: 30,
  /** of each kind; with 20, a share of 0.9 has a Wilson interval of about 0.70 to 0.97 */
  leastStamps: 20,
  /** below the median of the others' mean kappas */
  farBelowMedian: 0.2,
  /** grades shared with the others, all pairs together */
  leastSharedGrades: 100,
  leastGradesSame: 50,
  sameShare: 0.95,
  sameAboveOthers: 0.1,
  /** looks of a stretch, and how many of them may not take this many seconds */
  stretch: 20,
  quickOfStretch: 15,
  quickSeconds: 1,
  driftStep: 0.1,
  heldHours: 2,
} as const

const percent = (share: number) => `${Math.round(100 * share)} %`

/** The thresholds as sentences for those who read the alerts. */
export const ALERT_RULES: readonly string[] = [
  `Alpha below ${ALERT.lowAlpha.toFixed(2)} over ${ALERT.leastCandidates} candidates or more.`,
  `Fewer than ${ALERT.leastStamps} calibration stamps of either kind.`,
  `Mean weighted kappa with the others at least ${ALERT.farBelowMedian} below the median of the others’, over ${ALERT.leastSharedGrades} shared grades or more.`,
  `One letter in ${percent(ALERT.sameShare)} of ${ALERT.leastGradesSame} grades or more, and at least ${Math.round(100 * ALERT.sameAboveOthers)} in a hundred more often than the others gave it to the same candidates.`,
  `${ALERT.quickOfStretch} of ${ALERT.stretch} looks in a row in less than ${ALERT.quickSeconds} s each.`,
  `Reliability in the first and the last third of the grades ${ALERT.driftStep} or more apart, with 95 % intervals that do not overlap.`,
  `Candidates held at an open bench, without a grade for ${ALERT.heldHours} hours.`,
]
