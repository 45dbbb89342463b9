import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'

export const LONGEST_MESSAGE = 4000

export const MessageInput = z.object({
  body: plainText('The message').pipe(
    z
      .string('Write something first.')
      .min(1, 'Write something first.')
      .max(LONGEST_MESSAGE, `A message has at most ${LONGEST_MESSAGE} characters. Send it in two.`),
  ),
})
export type MessageInput = z.output<typeof MessageInput>
