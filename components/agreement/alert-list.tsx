import type { Alert, GraderLabel } from '@/lib/work/reports/report-types'

/** What one might want to look at, each with the numbers that raised it. */
export function AlertList({ alerts, graders }: { alerts: readonly Alert[]; graders: readonly GraderLabel[] }) {
  return (
    <ul className="grid gap-x-10 gap-y-5 lg:grid-cols-2">
      {alerts.map(({ key, grader, title, because, advice }) => (
        <li key={`${key}-${grader}`} className="flex flex-col gap-1 border-l-4 border-split/60 pl-4">
          <p className="font-semibold">
            {grader === null ? null : <span>{graders[grader].label}: </span>}
            {grader === null ? title : title[0].toLowerCase() + title.slice(1)}
          </p>
          <p className="text-small">{because.replace(/(\d) %/g, '$1\u00a0%')}</p>
          <p className="text-small text-mute">{advice}</p>
        </li>
      ))}
    </ul>
  )
}
