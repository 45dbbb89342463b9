'use server'

import { revalidatePath } from 'next/cache'
import { z } from 'zod'
import { permitGrader } from '@/app/_lib/action-permit'
import { failedForm } from '@/app/_lib/form-state'
import type { SaveAnswer } from '@/components/measuring/save-measurement'
import { MeasurementInput } from '@/lib/work/measuring/measurement-input'
import { recordMeasurement } from '@/lib/work/measuring/record-measurement'
import { withdrawMeasurement } from '@/lib/work/measuring/withdraw-measurement'

/** The first sentence of what is wrong, since the desk has no field of its own for each number. */
function answerOf(error: unknown): SaveAnswer {
  if (error instanceof z.ZodError) return { message: error.issues[0]?.message }
  return { message: failedForm(error, new FormData()).message }
}

/** Keeps what a person measured; the desk stays as it is. */
export async function saveMeasurementAction(slug: string, candidateId: number, measured: unknown): Promise<SaveAnswer> {
  try {
    const { db, permit } = await permitGrader(slug)
    const { replaced } = await recordMeasurement(db, permit, candidateId, MeasurementInput.parse(measured))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: replaced === null ? 'Saved.' : 'Saved in place of your earlier one, which is kept.' }
  } catch (error) {
    return answerOf(error)
  }
}

/** Takes an own measurement back; it stays among the earlier ones. */
export async function withdrawMeasurementAction(
  slug: string,
  candidateId: number,
  measurementId: number,
): Promise<SaveAnswer> {
  try {
    const { db, permit } = await permitGrader(slug)
    await withdrawMeasurement(db, permit, candidateId, z.int().parse(measurementId))
    revalidatePath(`/campaigns/${slug}`, 'layout')
    return { done: 'Withdrawn.' }
  } catch (error) {
    return answerOf(error)
  }
}
