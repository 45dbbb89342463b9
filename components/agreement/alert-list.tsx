import type { Alert, GraderLabel } from '@/lib/work/reports/report-types'

/** What one might want to look at, each with the numbers that raised it. */
export function AlertList({
  alerts,
  graders,
  rules,
}: {
  alerts: readonly Alert[]
  graders: readonly GraderLabel[]
  rules: readonly string[]
}) {
  return (
    <>
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
      <details className="max-w-3xl text-small text-mute">
        <summary className="min-h-6 w-fit hover:text-text">When something is listed here</summary>
        <ul className="list-disc pb-2 pl-5 pt-2">
          {rules.map((rule) => (
            <li key={rule}>{rule}</li>
          ))}
        </ul>
        <p>
          The bound of alpha is the one commonly quoted after Krippendorff; the others are our choice, without a source.
          They raise a question and change nothing.
        </p>
      </details>
    </>
  )
}
