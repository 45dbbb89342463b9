import type { SplitOrder } from '@/lib/work/rulings/split-worth'

const NAMES: Record<SplitOrder, string> = {
  worth: 'what settling is worth',
  mean: 'mean, highest first',
  spread: 'spread, widest first',
  waiting: 'waiting longest',
  name: 'name',
}

/** By what the list is sorted, with the choice of another order, and what the order of worth means. */
export function SplitOrderChoice({
  order,
  method,
  onChoose,
}: {
  order: SplitOrder
  method: 'mean' | 'reliability'
  onChoose: (order: SplitOrder) => void
}) {
  return (
    <div className="flex flex-col gap-0.5">
      <label className="flex items-center gap-1.5 text-note text-mute">
        Sorted by
        <select
          value={order}
          onChange={(event) => onChoose(event.target.value as SplitOrder)}
          className="min-h-7 min-w-0 rounded-key border border-edge/60 bg-well px-1 text-note text-text"
        >
          {(Object.keys(NAMES) as SplitOrder[]).map((one) => (
            <option key={one} value={one}>
              {NAMES[one]}
            </option>
          ))}
        </select>
      </label>
      {order === 'worth' ? (
        <p className="text-note text-mute">
          {method === 'mean'
            ? 'First whose mean lies farthest from both thresholds, then the wider spread.'
            : 'First where a ruling tells most: a lens as probable as not is worth 1 bit.'}
        </p>
      ) : null}
    </div>
  )
}
