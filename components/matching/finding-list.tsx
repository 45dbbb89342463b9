import type { Finding } from '@/lib/work/matching/read-list'

/** What is wrong with a list: what stops it first, each in words and not by colour alone. */
export function FindingList({ findings }: { findings: readonly Finding[] }) {
  const sorted = findings.toSorted((a, b) => Number(b.stops) - Number(a.stops))
  return (
    <ul className="flex flex-col gap-2 text-small">
      {sorted.map(({ sentence, stops }) => (
        <li
          key={sentence}
          className={`rounded-control border-l-4 bg-raise px-4 py-2.5 ${stops ? 'border-alarm' : 'border-edge'}`}
        >
          <b className="font-semibold">{stops ? 'In the way: ' : 'To know: '}</b>
          {sentence}
        </li>
      ))}
    </ul>
  )
}
