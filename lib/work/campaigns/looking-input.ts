import { z } from 'zod'

export const QUEUE_ORDERS = ['most needed', 'score', 'shuffled'] as const

/** A share in per cent, as a form writes it. */
const percent = (most: number, what: string) =>
  z.coerce
    .number(`${what} is a number of per cent.`)
    .min(0, `${what} is not below 0 %.`)
    .max(most, `${what} is at most ${most} %.`)
    .transform((value) => value / 100)

/** How people look: what is mixed into their queues, what they practise first, and the order. */
export const LookingInput = z.object({
  queueOrder: z.enum(QUEUE_ORDERS, `The order is one of: ${QUEUE_ORDERS.join(', ')}.`),
  calibrationPercent: percent(50, 'The share of calibration stamps'),
  repeatPercent: percent(20, 'The share of repeats'),
  practiceWanted: z.coerce
    .number('Practice is a number of stamps.')
    .int('Practice is a whole number of stamps.')
    .min(0, 'Practice is not below 0.')
    .max(100, 'Practice is at most 100 stamps.'),
})
export type LookingInput = z.output<typeof LookingInput>
