import { moment } from '@/components/campaigns/in-words'
import { StatePill } from '@/components/ui/state-pill'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import type { EvidenceRuling, EvidenceStateChange } from '@/lib/work/rulings/candidate-evidence'

/** Every ruling, newest first: the one that stands is marked, the others stay readable. */
export function RulingList({ rulings, standing }: { rulings: EvidenceRuling[]; standing: EvidenceRuling | null }) {
  if (rulings.length === 0) return <p className="text-small text-mute">No lead has ruled on it.</p>
  return (
    <ol className="flex flex-col gap-3">
      {rulings.map((ruling) => (
        <li key={ruling.id} className={`border-l-2 pl-3 ${ruling.id === standing?.id ? 'border-lamp' : 'border-line'}`}>
          <p>
            <span className="font-semibold">{describeOutcome(ruling)}</span> by {ruling.by}
            {ruling.id === standing?.id ? <span className="text-note text-mute">, stands</span> : null}
          </p>
          <p className="whitespace-pre-line text-small [overflow-wrap:anywhere]">“{ruling.reason}”</p>
          <p className="text-note text-mute">{moment(ruling.at)}</p>
        </li>
      ))}
    </ol>
  )
}

/** Every change of state with its cause, oldest first. */
export function StateHistory({ history }: { history: EvidenceStateChange[] }) {
  if (history.length === 0) return <p className="text-small text-mute">It has been open since it came in.</p>
  return (
    <ol className="flex flex-col gap-3">
      {history.map((change) => (
        <li key={change.id} className="flex flex-col gap-1">
          <span className="flex flex-wrap items-center gap-2">
            <StatePill state={change.from} />
            <span aria-label="to">→</span>
            <StatePill state={change.to} />
            <span className="text-note text-mute">{moment(change.at)}</span>
          </span>
          <span className="text-small text-mute [overflow-wrap:anywhere]">{change.reason}</span>
        </li>
      ))}
    </ol>
  )
}
