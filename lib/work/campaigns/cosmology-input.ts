import { z } from 'zod'

export const COSMOLOGIES = ['flat LCDM', 'Planck 2018'] as const

const typed = (what: string, low: number, high: number, unit: string) =>
  z.coerce
    .number(`${what} is a number${unit && ` of${unit}`}.`)
    .min(low, `${what} lies from ${low} to ${high}${unit}.`)
    .max(high, `${what} lies from ${low} to ${high}${unit}.`)

/** Of Planck 2018 the two numbers are the work's own, and what the form says of them is not looked at. */
export const CosmologyInput = z.discriminatedUnion(
  'cosmology',
  [
    z.object({ cosmology: z.literal('Planck 2018') }),
    z.object({
      cosmology: z.literal('flat LCDM'),
      hubbleConstant: typed('The Hubble constant', 20, 150, ' km/s/Mpc'),
      omegaMatter: typed('The density of matter', 0.01, 1, ''),
    }),
  ],
  { error: `The cosmology is one of: ${COSMOLOGIES.join(', ')}.` },
)
export type CosmologyInput = z.output<typeof CosmologyInput>
