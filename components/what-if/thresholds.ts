/** The thresholds of either method as sliders: what they are called, which values a slider stops at, and how they read. */
import { DEFAULT_MEAN_RULE } from '@/lib/science/agreement/mean-rule'
import { DEFAULT_RELIABILITY_RULE } from '@/lib/science/agreement/reliability-rule'
import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { ruleProblems } from '@/lib/work/consensus/try-rule'

export type Method = RuleInput['method']

export interface Threshold {
  name: string
  label: string
  unit: string
  /** what it does, and for whom */
  hint: string
  /** values that the slider stops at, rising */
  stops: readonly number[]
  /** the value beside the slider in words, where its figure alone says little */
  inWords?: (value: number) => string
}

const steps = (from: number, to: number, step: number): number[] =>
  Array.from({ length: Math.round((to - from) / step) + 1 }, (_, at) => Number((from + at * step).toFixed(4)))

/** Ten stops a decade, to two digits. */
const decades = (from: number, to: number): number[] => {
  const stops: number[] = []
  for (let at = Math.round(10 * Math.log10(from)); at <= Math.round(10 * Math.log10(to)); at++) {
    stops.push(Number((10 ** (at / 10)).toPrecision(2)))
  }
  return stops
}

const oneIn = (share: number) =>
  share > 0 && share <= 0.5 ? `1 in ${Math.round(1 / share).toLocaleString('en')}` : `${(100 * share).toPrecision(3)} %`

export const THRESHOLDS: Readonly<Record<Method, readonly Threshold[]>> = {
  mean: [
    {
      name: 'confirmMean',
      label: 'Confirm from a mean of',
      unit: 'points',
      hint: 'A 3, B 2, C 1, N 0.',
      stops: steps(0, 3, 0.05),
    },
    {
      name: 'setAsideMean',
      label: 'Set aside up to a mean of',
      unit: 'points',
      hint: 'Below the mean that confirms.',
      stops: steps(0, 3, 0.05),
    },
    {
      name: 'splitSpread',
      label: 'Split above a spread of',
      unit: 'points',
      hint: 'Standard deviation of the grades; 1.5 is the most there is.',
      stops: steps(0, 1.5, 0.05),
    },
    {
      name: 'leastGrades',
      label: 'Least grades',
      unit: 'grades',
      hint: 'Nothing is decided with fewer.',
      stops: steps(1, 20, 1),
    },
    {
      name: 'gradesWanted',
      label: 'Grades wanted',
      unit: 'looks',
      hint: 'What lies between is open until then, a split after.',
      stops: steps(1, 20, 1),
    },
  ],
  reliability: [
    {
      name: 'falseConfirmed',
      label: 'Non-lenses that may be confirmed',
      unit: 'share',
      hint: 'A share. Lower makes a purer catalogue.',
      stops: decades(1e-5, 0.2),
      inWords: oneIn,
    },
    {
      name: 'missedLens',
      label: 'Lenses that may be set aside',
      unit: 'share',
      hint: 'A share. Lower makes a more complete catalogue.',
      stops: decades(1e-3, 0.5),
      inWords: oneIn,
    },
    {
      name: 'leastGrades',
      label: 'Least grades',
      unit: 'grades',
      hint: 'Nothing is decided with fewer.',
      stops: steps(1, 20, 1),
    },
    {
      name: 'gradesWanted',
      label: 'Most looks',
      unit: 'looks',
      hint: 'What lies between is open until then, a split after.',
      stops: steps(1, 20, 1),
    },
  ],
}

const DEFAULTS: { [M in Method]: Extract<RuleInput, { method: M }> } = {
  mean: { method: 'mean', ...DEFAULT_MEAN_RULE },
  reliability: {
    method: 'reliability',
    gradesWanted: DEFAULT_RELIABILITY_RULE.mostLooks,
    leastGrades: DEFAULT_RELIABILITY_RULE.leastGrades,
    falseConfirmed: DEFAULT_RELIABILITY_RULE.falseConfirmed,
    missedLens: DEFAULT_RELIABILITY_RULE.missedLens,
  },
}

/** Where the sliders of a method begin: the rule in force if it is of that method, else the usual values. */
export function startOf(method: Method, inForce: RuleInput): RuleInput {
  return inForce.method === method ? ruleOf(inForce) : DEFAULTS[method]
}

export function valueOf(rule: RuleInput, name: string): number {
  return (rule as unknown as Record<string, number>)[name]
}

export function withValue(rule: RuleInput, name: string, value: number): RuleInput {
  return { ...rule, [name]: value }
}

/** The most looks that a rule's form takes. */
const MOST_LOOKS = 50

/** What stands in the way of trying or making the rule, in a sentence; null where nothing does. */
export function problemOf(rule: RuleInput): string | null {
  const problem = ruleProblems(rule)[0]
  if (problem) return problem
  return rule.gradesWanted > MOST_LOOKS ? `No more than ${MOST_LOOKS} looks can be wanted of a candidate.` : null
}

/** Only what makes up the rule, without its version. */
function ruleOf(rule: RuleInput): RuleInput {
  const values = THRESHOLDS[rule.method].map(({ name }) => [name, valueOf(rule, name)])
  return { method: rule.method, ...Object.fromEntries(values) } as RuleInput
}

export function isSameRule(a: RuleInput, b: RuleInput): boolean {
  return a.method === b.method && THRESHOLDS[a.method].every(({ name }) => valueOf(a, name) === valueOf(b, name))
}

/** The rule that an address tells, over the start of its method; what it does not tell or tells wrongly stays at the start. */
export function ruleFromAddress(query: Readonly<Record<string, string>>, inForce: RuleInput): RuleInput {
  const method: Method = query.method === 'mean' || query.method === 'reliability' ? query.method : inForce.method
  let rule = startOf(method, inForce)
  for (const { name, stops } of THRESHOLDS[method]) {
    const value = query[name]?.trim() ? Number(query[name]) : NaN
    const isWhole = Number.isInteger(stops[1]) ? Number.isInteger(value) : true
    if (value >= 0 && value <= 50 && isWhole) rule = withValue(rule, name, value)
  }
  return rule
}

/** What the address says of a rule: nothing where it is the one in force, else its method and what differs from the start. */
export function addressOf(rule: RuleInput, inForce: RuleInput): string {
  if (isSameRule(rule, inForce)) return ''
  const start = startOf(rule.method, inForce)
  const query = new URLSearchParams(rule.method === inForce.method ? {} : { method: rule.method })
  for (const { name } of THRESHOLDS[rule.method]) {
    if (valueOf(rule, name) !== valueOf(start, name)) query.set(name, String(valueOf(rule, name)))
  }
  return `?${query}`
}

/** Index of the stop nearest to the value. */
export function nearestStop(stops: readonly number[], value: number): number {
  let best = 0
  for (let at = 1; at < stops.length; at++) {
    if (Math.abs(stops[at] - value) < Math.abs(stops[best] - value)) best = at
  }
  return best
}
