'use client'

import { useState } from 'react'
import { TextField } from '@/components/ui/field'
import { errorRateProblems } from '@/lib/science/agreement/sequential-test'
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import { DEFAULT_RELIABILITY_RULE } from '@/lib/science/agreement/reliability-rule'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { RULE_FIELDS, type RuleField } from './rule-field-list'
import { ruleInWords } from './rule-in-words'
import { RuleMethodChoice } from './rule-method-choice'
import { RuleScale } from './rule-scale'

type Method = RuleInput['method']

const STARTS: Record<Method, Record<string, number>> = {
  mean: { ...DEFAULT_MEAN_RULE },
  reliability: { ...DEFAULT_RELIABILITY_RULE, gradesWanted: DEFAULT_RELIABILITY_RULE.mostLooks },
}

const numberOf = (text: string) => (text.trim() === '' ? Number.NaN : Number(text.replace(',', '.')))

/** The texts of a method's fields: as the rule in force has them, or where it goes by the other method the defaults. */
function textsOf(method: Method, rule: RuleInput): Record<string, string> {
  const from: Record<string, unknown> = rule.method === method ? { ...rule } : STARTS[method]
  return Object.fromEntries(RULE_FIELDS[method].map(({ name }) => [name, String(from[name])]))
}

function typedRule(method: Method, texts: Record<string, string>): RuleInput {
  const number = (name: string) => numberOf(texts[name])
  const common = { gradesWanted: number('gradesWanted'), leastGrades: number('leastGrades') }
  return method === 'mean'
    ? {
        method,
        ...common,
        confirmMean: number('confirmMean'),
        setAsideMean: number('setAsideMean'),
        splitSpread: number('splitSpread'),
      }
    : { method, ...common, falseConfirmed: number('falseConfirmed'), missedLens: number('missedLens') }
}

/** The method, its numbers, and what they mean as one types them. What was typed for the other method is kept meanwhile. */
export function RuleFields({ rule, errors }: { rule: RuleInput; errors?: Record<string, string> }) {
  const [method, setMethod] = useState<Method>(rule.method)
  const [texts, setTexts] = useState({ mean: textsOf('mean', rule), reliability: textsOf('reliability', rule) })
  const typed = typedRule(method, texts[method])
  const field = ({ name, label, hint, step }: RuleField) => (
    <TextField
      key={`${method}-${name}`}
      name={name}
      label={label}
      hint={hint}
      error={errors?.[name]}
      value={texts[method][name]}
      onChange={(event) => setTexts({ ...texts, [method]: { ...texts[method], [name]: event.target.value } })}
      inputMode={step === 1 ? 'numeric' : 'decimal'}
      className="figures max-w-28"
      autoComplete="off"
    />
  )
  const fields = RULE_FIELDS[method]
  return (
    <div className="flex flex-col gap-5">
      <RuleMethodChoice value={method} onChange={setMethod} />
      <div className="grid gap-5 sm:grid-cols-2">{fields.slice(0, 2).map(field)}</div>
      <div className={`grid gap-5 ${fields.length === 5 ? 'sm:grid-cols-3' : 'sm:grid-cols-2'}`}>
        {fields.slice(2).map(field)}
      </div>
      <div className="flex flex-col gap-3 rounded-tray border border-line p-4">
        {typed.method === 'mean' ? <RuleScale rule={typed} /> : null}
        <p aria-live="polite" className="text-small text-mute">
          {wordsFor(typed)}
        </p>
      </div>
    </div>
  )
}

function wordsFor(typed: RuleInput): string {
  const { method, ...numbers } = typed
  if (!Object.values(numbers).every(Number.isFinite)) {
    return `Fill in all ${method === 'mean' ? 'five' : 'four'} numbers to read here what the rule does.`
  }
  const problem = typed.method === 'reliability' ? errorRateProblems(typed)[0] : undefined
  return problem ?? ruleInWords(typed)
}
