'use client'

import { useState } from 'react'
import { TextField } from '@/components/ui/field'
import type { MeanRule } from '@/lib/science/agreement/mean-rule'
import { ruleInWords } from './rule-in-words'
import { RuleScale } from './rule-scale'

const FIELDS = [
  {
    name: 'gradesWanted',
    label: 'Grades wanted',
    hint: 'How many people look at each candidate. Six or more even out the differences between people.',
    step: 1,
  },
  {
    name: 'leastGrades',
    label: 'Least grades',
    hint: 'Nothing is decided with fewer. ‘Cannot judge’ does not count as a grade.',
    step: 1,
  },
  { name: 'confirmMean', label: 'Confirm from a mean of', hint: 'Points: A 3, B 2, C 1, N 0.', step: 0.1 },
  {
    name: 'setAsideMean',
    label: 'Set aside up to a mean of',
    hint: 'Points. Below the mean that confirms.',
    step: 0.1,
  },
  {
    name: 'splitSpread',
    label: 'Split above a spread of',
    hint: 'Points, standard deviation of the grades. One A against one N is 1.5, the most there is.',
    step: 0.1,
  },
] as const

type Name = (typeof FIELDS)[number]['name']

const numberOf = (text: string) => (text.trim() === '' ? Number.NaN : Number(text.replace(',', '.')))

/** The five numbers of the rule, and what they mean as one types them. */
export function RuleFields({ rule, errors }: { rule: MeanRule; errors?: Record<string, string> }) {
  const [texts, setTexts] = useState<Record<Name, string>>({
    gradesWanted: String(rule.gradesWanted),
    leastGrades: String(rule.leastGrades),
    confirmMean: String(rule.confirmMean),
    setAsideMean: String(rule.setAsideMean),
    splitSpread: String(rule.splitSpread),
  })
  const typed: MeanRule = {
    gradesWanted: numberOf(texts.gradesWanted),
    leastGrades: numberOf(texts.leastGrades),
    confirmMean: numberOf(texts.confirmMean),
    setAsideMean: numberOf(texts.setAsideMean),
    splitSpread: numberOf(texts.splitSpread),
  }
  const complete = Object.values(typed).every(Number.isFinite)
  const field = ({ name, label, hint, step }: (typeof FIELDS)[number]) => (
    <TextField
      key={name}
      name={name}
      label={label}
      hint={hint}
      error={errors?.[name]}
      value={texts[name]}
      onChange={(event) => setTexts({ ...texts, [name]: event.target.value })}
      inputMode={step === 1 ? 'numeric' : 'decimal'}
      className="figures max-w-28"
      autoComplete="off"
    />
  )
  return (
    <div className="flex flex-col gap-5">
      <div className="grid gap-5 sm:grid-cols-2">{FIELDS.slice(0, 2).map(field)}</div>
      <div className="grid gap-5 sm:grid-cols-3">{FIELDS.slice(2).map(field)}</div>
      <div className="flex flex-col gap-3 rounded-tray border border-line p-4">
        <RuleScale rule={typed} />
        <p aria-live="polite" className="text-small text-mute">
          {complete ? ruleInWords(typed) : 'Fill in all five numbers to read here what the rule does.'}
        </p>
      </div>
    </div>
  )
}
