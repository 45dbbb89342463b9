import { z } from 'zod'
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'

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

/** Thresholds of the mean method. Grade points: A 3, B 2, C 1, N 0. */
export const RuleInput = z
  .object({
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
export type RuleInput = z.output<typeof RuleInput>

/** `g, r, i` or `g r i`, shortest wavelength first. */
const Bands = z
  .string()
  .transform((text) => text.split(/[\s,;]+/).filter(Boolean))
  .pipe(
    z
      .array(
        z
          .string()
          .regex(
            /^[A-Za-z0-9.+-]{1,16}$/,
            'A band name is up to 16 letters, digits, dots, + or -, such as g or F814W.',
          ),
      )
      .min(1, 'Name at least one band.')
      .max(12, 'At most 12 bands.')
      .refine((bands) => new Set(bands).size === bands.length, 'Each band is named once.'),
  )

export const DEFAULT_NAME_PATTERN = '{candidate}_{band}'

/** How a delivered file's name, without folders and endings, tells candidate and band. */
export const NamePattern = z
  .string()
  .trim()
  .max(100, 'The name pattern has at most 100 characters.')
  .refine((text) => text === '' || text.includes('{candidate}'), 'The name pattern must contain {candidate}.')
  .refine(
    (text) => (text.match(/\{[^}]*\}/g) ?? []).every((part) => ['{candidate}', '{band}', '{any}'].includes(part)),
    {
      message: 'The name pattern knows {candidate}, {band} and {any}.',
    },
  )
  .refine((text) => (text.match(/\{any\}/g) ?? []).length <= 2, 'The name pattern has at most two {any}.')
  .transform((text) => text || null)

export const CampaignInput = z.object({
  name: z.string().trim().min(1, 'Give the campaign a name.').max(120, 'The name has at most 120 characters.'),
  survey: z.string().trim().min(1, 'Name the survey.').max(120, 'The survey name has at most 120 characters.'),
  // IAU: at least three characters, letters and digits; see lib/science/sky/designation.ts.
  acronym: z
    .string()
    .trim()
    .regex(
      /^[A-Z][A-Za-z0-9-]{2,15}$/,
      'The acronym has 3 to 16 letters and digits and starts with a capital, such as SWS.',
    ),
  bands: Bands,
  namePattern: NamePattern.default(null),
})
export type CampaignInput = z.output<typeof CampaignInput>

/** Both parts of the form at once, so that every fault is told in one go. @throws ZodError with the issues of both. */
export function parseCampaignForm(fields: Record<string, unknown>): { campaign: CampaignInput; rule: RuleInput } {
  const campaign = CampaignInput.safeParse(fields)
  const rule = RuleInput.safeParse(fields)
  if (campaign.success && rule.success) return { campaign: campaign.data, rule: rule.data }
  throw new z.ZodError([...(campaign.error?.issues ?? []), ...(rule.error?.issues ?? [])])
}

export const NamePatternInput = z.object({ namePattern: NamePattern })
