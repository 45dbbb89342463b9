import type { FormState } from '@/components/ui/form-state'
import { Notice } from '@/components/ui/notice'

/** What a form has to say after it was sent. */
export function FormNote({ state }: { state: FormState }) {
  if (state.message) return <Notice tone="alarm">{state.message}</Notice>
  if (state.done) return <Notice tone="done">{state.done}</Notice>
  return null
}
