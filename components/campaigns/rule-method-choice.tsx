import type { RuleInput } from '@/lib/work/campaigns/rule-input'
import { METHOD_IN_WORDS } from './rule-in-words'

type Method = RuleInput['method']

const METHODS: readonly { value: Method; label: string }[] = [
  { value: 'mean', label: 'Mean of the grades' },
  { value: 'reliability', label: 'Reliability of the graders' },
]

/** How grades become a verdict. */
export function RuleMethodChoice({ value, onChange }: { value: Method; onChange: (method: Method) => void }) {
  return (
    <fieldset className="flex flex-col gap-2">
      <legend className="mb-1 text-small font-semibold">Method</legend>
      {METHODS.map((method) => (
        <label key={method.value} className="flex max-w-2xl items-start gap-2.5 text-body">
          <input
            type="radio"
            name="method"
            value={method.value}
            checked={value === method.value}
            onChange={() => onChange(method.value)}
            className="mt-1 size-4 shrink-0 accent-(--lamp)"
          />
          <span>
            {method.label}
            <span className="block text-note text-mute">{METHOD_IN_WORDS[method.value]}</span>
          </span>
        </label>
      ))}
    </fieldset>
  )
}
