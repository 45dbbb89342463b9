import { z } from 'zod'
import { faultsOfRanges, type PaintingRanges, type RANGE_LIMITS } from '@/lib/science/lensing/painting/painting-ranges'

const number = z.number('This is a number.')
const range = z.tuple([number, number], 'This is a lower and an upper end.')

/** Ranges as a lead sends them. */
export const RangesInput: z.ZodType<PaintingRanges> = z
  .strictObject({
    einsteinRadiusArcsec: range,
    axisRatioScatter: number,
    positionAngleScatterDeg: number,
    shearStrength: range,
    sourceOffset: range,
    sourceRadiusArcsec: range,
    sersicIndex: range,
    sourceAxisRatio: range,
    arcSignalToNoise: range,
  } satisfies Record<keyof typeof RANGE_LIMITS, z.ZodType>)
  .superRefine((ranges, context) => {
    for (const { name, reason } of faultsOfRanges(ranges)) {
      context.addIssue({ code: 'custom', path: [name], message: reason })
    }
  })

const galaxies = (most: number) =>
  z
    .array(z.number('A candidate is named by its number.').int().positive())
    .min(1, 'Choose at least one galaxy.')
    .max(most, `At most ${most} galaxies at once.`)
    .transform((ids) => [...new Set(ids)])

export const MOST_PREVIEWED = 6
export const MOST_PAINTED = 500

const seed = z
  .number('The seed is a whole number.')
  .int('The seed is a whole number.')
  .min(0)
  .max(2 ** 48)

export const PreviewInput = z.strictObject({ ranges: RangesInput, galaxies: galaxies(MOST_PREVIEWED), seed })
export type PreviewInput = z.output<typeof PreviewInput>

export const OrderInput = z
  .strictObject({
    ranges: RangesInput,
    galaxies: galaxies(2 * MOST_PAINTED),
    /** How many are painted on, and how many are taken as they are. */
    lenses: z.number('The number of lenses is a whole number.').int().min(0, 'Not below 0.').max(MOST_PAINTED),
    others: z.number('The number of non-lenses is a whole number.').int().min(0, 'Not below 0.').max(MOST_PAINTED),
    seed,
  })
  .superRefine(({ lenses, others, galaxies: chosen }, context) => {
    if (lenses + others === 0) {
      context.addIssue({ code: 'custom', path: ['lenses'], message: 'Say how many are to be made.' })
    }
    if (lenses + others > chosen.length) {
      const message = `${lenses + others} stamps take as many galaxies, and ${chosen.length} are chosen. Choose more, or make fewer.`
      context.addIssue({ code: 'custom', path: ['galaxies'], message })
    }
  })
export type OrderInput = z.output<typeof OrderInput>
