import { z } from 'zod'
import type { MeanParameters, ReliabilityParameters } from '@/db/schema/campaigns'
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import { DEFAULT_RELIABILITY_RULE } from '@/lib/science/agreement/reliability-rule'

/** An empty field is a missing number, not 0, and `1,5` is what many write for 1.5. */
const typedNumber = (value: unknown) =>
  typeof value === 'string' ? (value.trim() === '' ? Number.NaN : Number(value.trim().replace(',', '.'))) : value

const count = (what: string, fallback: number) =>
  z
    .preprocess(
      typedNumber,
      z
        .number(`${what} is a whole number, such as ${fallback}.`)
        .int(`${what} is a whole number, such as ${fallback}.`)
        .min(1, `${what} is at least 1.`)
        .max(50, `${what} is at most 50.`),
    )
    .default(fallback)

/** The most that the population standard deviation of grades from 0 to 3 points can be: half of them A, half N. */
const LARGEST_SPREAD = 1.5

const points = (what: string, fallback: number, most = 3, why = '') =>
  z
    .preprocess(
      typedNumber,
      z
        .number(`${what} is a number of points, such as ${fallback}.`)
        .min(0, `${what} is between 0 and ${most} points${why}.`)
        .max(most, `${what} is between 0 and ${most} points${why}.`),
    )
    .default(fallback)

const share = (what: string, fallback: number) =>
  z
    .preprocess(
      typedNumber,
      z
        .number(`${what} is a number between 0 and 1, such as ${fallback}.`)
        .gt(0, `${what} is above 0: no number of looks makes a grade certain. Such as ${fallback}.`)
        .lt(1, `${what} is a number between 0 and 1, such as ${fallback}.`),
    )
    .default(fallback)

/** Thresholds of the mean method. Grade points: A 3, B 2, C 1, N 0. */
const MeanRuleInput = z
  .object({
    method: z.literal('mean'),
    gradesWanted: count('The number of grades wanted', DEFAULT_MEAN_RULE.gradesWanted),
    leastGrades: count('The least number of grades', DEFAULT_MEAN_RULE.leastGrades),
    confirmMean: points('The mean that confirms', DEFAULT_MEAN_RULE.confirmMean),
    setAsideMean: points('The mean that sets aside', DEFAULT_MEAN_RULE.setAsideMean),
    splitSpread: points(
      'The spread that splits',
      DEFAULT_MEAN_RULE.splitSpread,
      LARGEST_SPREAD,
      ': as many A as N spread by 1.5, and nothing spreads more',
    ),
  })
  .superRefine((rule, context) => {
    if (rule.gradesWanted >= 1 && rule.leastGrades > rule.gradesWanted) {
      context.addIssue({
        code: 'custom',
        path: ['leastGrades'],
        message: 'The least number of grades cannot be more than the number wanted.',
      })
    }
    if (rule.setAsideMean >= rule.confirmMean) {
      context.addIssue({
        code: 'custom',
        path: ['setAsideMean'],
        message: 'The mean that sets aside must be below the mean that confirms.',
      })
    }
  })

/** Error rates and looks of the reliability method; `gradesWanted` is the most looks. */
const ReliabilityRuleInput = z
  .object({
    method: z.literal('reliability'),
    gradesWanted: count('The most looks', DEFAULT_RELIABILITY_RULE.mostLooks),
    leastGrades: count('The least number of grades', DEFAULT_RELIABILITY_RULE.leastGrades),
    falseConfirmed: share(
      'The share of what is not a lens that may be confirmed',
      DEFAULT_RELIABILITY_RULE.falseConfirmed,
    ),
    missedLens: share('The share of lenses that may be set aside', DEFAULT_RELIABILITY_RULE.missedLens),
  })
  .superRefine((rule, context) => {
    if (rule.gradesWanted >= 1 && rule.leastGrades > rule.gradesWanted) {
      context.addIssue({
        code: 'custom',
        path: ['leastGrades'],
        message: 'The least number of grades cannot be more than the most looks.',
      })
    }
    if (rule.falseConfirmed + rule.missedLens >= 1) {
      context.addIssue({
        code: 'custom',
        path: ['missedLens'],
        message: 'The two shares of errors must sum to less than 1: else no grade would be needed at all.',
      })
    }
  })

/** Fields that name no method are those of the mean. */
const withMethod = (fields: unknown) =>
  typeof fields === 'object' && fields !== null && !('method' in fields) ? { method: 'mean', ...fields } : fields

export const RuleInput = z.preprocess(
  withMethod,
  z.discriminatedUnion('method', [MeanRuleInput, ReliabilityRuleInput], {
    error: 'The method is one of: mean, reliability.',
  }),
)
export type RuleInput = z.output<typeof RuleInput>

/** The rule as its row keeps it: what both methods have, and the parameters that only its own has. */
export function ruleRowOf(rule: RuleInput): {
  method: RuleInput['method']
  gradesWanted: number
  leastGrades: number
  parameters: MeanParameters | ReliabilityParameters
} {
  const { method, gradesWanted, leastGrades, ...parameters } = rule
  return { method, gradesWanted, leastGrades, parameters }
}
