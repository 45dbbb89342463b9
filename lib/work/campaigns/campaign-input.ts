import { z } from 'zod'
import { RuleInput } from './rule-input'

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
