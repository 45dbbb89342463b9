'use client'

import { useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { BarPlot } from '@/components/plots/bar-plot'
import { PEOPLE_FILLS, type Fill } from '@/components/plots/fills'
import { ToolButton } from '@/components/table/tool-button'
import type { GradesPerDay } from '@/lib/work/reports/report-types'

const LETTERS: { label: string; fill: Fill }[] = [
  { label: 'A', fill: 'a' },
  { label: 'B', fill: 'b' },
  { label: 'C', fill: 'c' },
  { label: 'N', fill: 'n' },
  { label: 'cannot judge', fill: 'none' },
]

const BIN: Record<number, string> = { 1: 'day', 7: 'week' }

/** `3 Mar` of `2026-03-03` */
const shortDay = (date: string) =>
  new Date(`${date}T00:00:00Z`).toLocaleDateString('en-GB', { day: 'numeric', month: 'short', timeZone: 'UTC' })

/** Looks a day, stacked by letter or by person. */
export function DaysPart({
  days,
  labels,
  fileName,
}: {
  days: GradesPerDay
  labels: readonly string[]
  fileName: string
}) {
  const [byPerson, setByPerson] = useState(false)
  if (days.bins.length === 0) return <p className="text-mute">No looks yet.</p>
  const bin = BIN[days.binDays] ?? `${days.binDays} days`
  const drawn = byPerson ? Math.min(labels.length, PEOPLE_FILLS.length) : LETTERS.length
  const others = byPerson && labels.length > PEOPLE_FILLS.length
  const own = others ? drawn - 1 : drawn
  const people = [
    ...labels.slice(0, own).map((label, at) => ({ label, fill: PEOPLE_FILLS[at] })),
    ...(others ? [{ label: `${labels.length - own} others`, fill: PEOPLE_FILLS[own] }] : []),
  ]
  const parts = byPerson ? people : LETTERS
  const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0)
  const bars = days.bins.map(({ day, byLetter, byGrader }) => {
    const values = byPerson ? (others ? [...byGrader.slice(0, own), sum(byGrader.slice(own))] : byGrader) : byLetter
    const told = values.flatMap((value, at) => (value > 0 ? [`${parts[at].label} ${value.toLocaleString('en')}`] : []))
    return {
      label: shortDay(day),
      values,
      reading: `${days.binDays === 1 ? '' : `${bin[0].toUpperCase()}${bin.slice(1)} from `}${shortDay(day)}: ${counted(sum(values), 'look')}${told.length ? ` (${told.join(', ')})` : ''}.`,
    }
  })
  return (
    <BarPlot
      title={`Looks a ${bin}, by ${byPerson ? 'person' : 'letter'}`}
      description={`${counted(sum(days.bins.map(({ byLetter }) => sum(byLetter))), 'look')} from ${days.bins[0].day} to ${days.bins[days.bins.length - 1].day}, stacked by ${byPerson ? 'person' : 'letter'}.`}
      fileName={`${fileName}-looks-by-${byPerson ? 'person' : 'letter'}`}
      xLabel={days.binDays === 1 ? 'Day (UTC)' : `First day of the ${bin} (UTC)`}
      yLabel={`Looks a ${bin}`}
      bars={bars}
      parts={parts}
      tools={<ToolButton onClick={() => setByPerson(!byPerson)}>By {byPerson ? 'letter' : 'person'}</ToolButton>}
      table={{
        columns: [
          { name: `${bin} from` },
          ...(byPerson ? labels : LETTERS.map(({ label }) => label)).map((name) => ({ name, numeric: true })),
        ],
        rows: days.bins.map(({ day, byLetter, byGrader }) => [day, ...(byPerson ? byGrader : byLetter)]),
      }}
    />
  )
}
