'use client'

import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { NamePatternField } from './name-pattern-field'
import { RuleFields } from './rule-fields'

export function RuleForm({ rule, action }: { rule: RuleInput & { version: number }; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex flex-col gap-5" aria-label="Rule">
      {/* A version that was saved becomes the new starting point. */}
      <RuleFields key={rule.version} rule={rule} errors={state.errors} />
      <FormNote state={state} />
      <Button tone="lamp" type="submit" disabled={pending} className="self-start px-6">
        {pending ? 'Saving…' : 'Save as a new version'}
      </Button>
    </form>
  )
}

export function NamePatternForm({ value, action }: { value: string | null; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex flex-col gap-4" aria-label="Name pattern">
      <NamePatternField value={value} error={state.errors?.namePattern} />
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        Save the pattern
      </Button>
    </form>
  )
}
