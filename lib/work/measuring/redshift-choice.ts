/** Which redshift a measurement is worked out with: the candidate's own, one that the person types, or an assumed range. */
import { z } from 'zod'
import type { RedshiftBasis } from '@/db/schema/measuring'
import type { RedshiftInput } from '@/lib/science/lensing/einstein-mass'

const number = (what: string) => z.number(`${what} is not a number: write it with digits, such as 0.45.`)

const choiceOf = (which: 'lens' | 'source') => {
  const its = `The redshift of the ${which}`
  const limit = (value: z.ZodNumber, low: number) =>
    value.min(low, `${its} cannot be below ${low}.`).max(20, `${its} is at most 20.`)
  const above = number(its).positive(`${its} must be above 0.`).max(20, `${its} is at most 20.`)
  return z.discriminatedUnion('basis', [
    z.object({ basis: z.literal('unknown') }),
    z.object({ basis: z.literal('given') }),
    z.object({
      basis: z.literal('typed'),
      value: above,
      error: number(`The error of the redshift of the ${which}`)
        .min(0, `The error of the redshift of the ${which} cannot be below 0.`)
        .max(5, `The error of the redshift of the ${which} is at most 5.`)
        .nullable(),
    }),
    z
      .object({
        basis: z.literal('assumed'),
        low: limit(number(`${its}, lower end,`), 0),
        high: limit(number(`${its}, upper end,`), 0),
      })
      .refine(({ low, high }) => high > low, {
        message: `The assumed range of the ${which} must go from a smaller to a larger redshift.`,
        path: ['high'],
      }),
  ])
}

export const RedshiftChoices = z.object({ lens: choiceOf('lens'), source: choiceOf('source') })
export type RedshiftChoices = z.output<typeof RedshiftChoices>
export type RedshiftChoice = RedshiftChoices['lens']

/** As it is kept with a measurement. `value` is the middle of an assumed range. */
export interface UsedRedshift {
  basis: RedshiftBasis
  value: number
  error: number | null
  low: number | null
  high: number | null
}

/** Ranges offered where nothing is known: what a range holds is common practice for galaxies as lenses, no single source. */
export const ASSUMED = { lens: { low: 0.2, high: 0.8 }, source: { low: 1, high: 3 } } as const

/** @param given the candidate's own. @returns null where there is none to use. */
export function usedRedshift(choice: RedshiftChoice, given: number | null): UsedRedshift | null {
  switch (choice.basis) {
    case 'unknown':
      return null
    case 'given':
      return given === null || given <= 0 ? null : { basis: 'given', value: given, error: null, low: null, high: null }
    case 'typed':
      return { basis: 'typed', value: choice.value, error: choice.error, low: null, high: null }
    case 'assumed':
      return {
        basis: 'assumed',
        value: (choice.low + choice.high) / 2,
        error: null,
        low: choice.low,
        high: choice.high,
      }
  }
}

export function redshiftInput({ value, error, low, high }: UsedRedshift): RedshiftInput {
  return low !== null && high !== null ? { low, high } : { value, error }
}
