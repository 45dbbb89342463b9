/** What a form action answers: a sentence, the faults by field, and what was typed, so that nothing is lost. */
export interface FormState {
  done?: string
  message?: string
  errors?: Record<string, string>
  values?: Record<string, string>
}
