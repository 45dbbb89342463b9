import type { RuleInput } from '@/lib/work/campaigns/rule-input'

export interface RuleField {
  name: string
  label: string
  hint: string
  /** 1 for whole numbers */
  step: number
}

/** The numbers of each method, in the order of the form. The first two are looks and grades. */
export const RULE_FIELDS: Record<RuleInput['method'], readonly RuleField[]> = {
  mean: [
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
  ],
  reliability: [
    {
      name: 'gradesWanted',
      label: 'Most looks',
      hint: 'How many people look at a candidate at most. Most candidates take two or three; only what stays in doubt takes all.',
      step: 1,
    },
    {
      name: 'leastGrades',
      label: 'Least grades',
      hint: 'Nothing is decided with fewer, however sure they are. ‘Cannot judge’ does not count as a grade.',
      step: 1,
    },
    {
      name: 'falseConfirmed',
      label: 'Non-lenses that may be confirmed',
      hint: 'As a share: 0.001 is one in a thousand. Where lenses are rare keep it well below their share, or the catalogue is not pure.',
      step: 0.001,
    },
    {
      name: 'missedLens',
      label: 'Lenses that may be set aside',
      hint: 'As a share: 0.05 is one in twenty. The smaller it is, the more looks it takes to set anything aside.',
      step: 0.01,
    },
  ],
}
