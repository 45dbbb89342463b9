import { z } from 'zod'

export const QUEUE_ORDERS = ['most needed', 'score', 'shuffled'] as const

/** A number, as a form writes it; an empty field is none and not 0. */
const written = (sentence: string) =>
  z.preprocess(
    (value) => (typeof value === 'string' ? (value.trim() === '' ? NaN : Number(value)) : value),
    z.number(sentence),
  )

/** A share in per cent. */
const percent = (most: number, what: string) =>
  written(`${what} is a number of per cent.`).pipe(
    z
      .number()
      .min(0, `${what} is not below 0 %.`)
      .max(most, `${what} is at most ${most} %.`)
      .transform((value) => value / 100),
  )

/** How people look: what is mixed into their queues, what they practise first, and the order. */
export const LookingInput = z.object({
  queueOrder: z.enum(QUEUE_ORDERS, `The order is one of: ${QUEUE_ORDERS.join(', ')}.`),
  calibrationPercent: percent(50, 'The share of calibration stamps'),
  repeatPercent: percent(20, 'The share of repeats'),
  practiceWanted: written('Practice is a number of stamps; 0 asks for none.').pipe(
    z
      .number()
      .int('Practice is a whole number of stamps.')
      .min(0, 'Practice is not below 0.')
      .max(100, 'Practice is at most 100 stamps.'),
  ),
})
export type LookingInput = z.output<typeof LookingInput>
