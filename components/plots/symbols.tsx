/** Series are told apart by form before colour: a filled disc and an open square. */
export type SymbolForm = 'disc' | 'square'

export const SERIES_COLOUR: Record<SymbolForm, string> = { disc: 'var(--lamp)', square: 'var(--text)' }
export const SERIES_DASH: Record<SymbolForm, string | undefined> = { disc: undefined, square: '5 3' }

export function SeriesSymbol({ form, x, y, size = 4.5 }: { form: SymbolForm; x: number; y: number; size?: number }) {
  return form === 'disc' ? (
    <circle cx={x} cy={y} r={size} fill={SERIES_COLOUR.disc} />
  ) : (
    <rect
      x={x - size}
      y={y - size}
      width={2 * size}
      height={2 * size}
      fill="var(--page)"
      stroke={SERIES_COLOUR.square}
      strokeWidth="1.75"
    />
  )
}

/** An interval with caps, along x or y. */
export function Whisker({
  form,
  from,
  to,
  at,
  along,
}: {
  form: SymbolForm
  from: number
  to: number
  at: number
  along: 'x' | 'y'
}) {
  const cap = 3
  const d =
    along === 'x'
      ? `M${from} ${at}H${to}M${from} ${at - cap}V${at + cap}M${to} ${at - cap}V${at + cap}`
      : `M${at} ${from}V${to}M${at - cap} ${from}H${at + cap}M${at - cap} ${to}H${at + cap}`
  return <path d={d} stroke={SERIES_COLOUR[form]} strokeWidth="1.5" fill="none" />
}

/** One entry a series, in a row that breaks where the width ends. */
export function SeriesLegend({
  entries,
  x = 0,
  y,
  lined = false,
}: {
  entries: readonly { form: SymbolForm; label: string; at: number; row?: number }[]
  x?: number
  y: number
  lined?: boolean
}) {
  return (
    <g>
      {entries.map(({ form, label, at, row = 0 }) => (
        <g key={label} transform={`translate(${x + at} ${y + row * 18})`}>
          {lined ? (
            <path d="M0 0H24" stroke={SERIES_COLOUR[form]} strokeWidth="1.5" strokeDasharray={SERIES_DASH[form]} />
          ) : null}
          <SeriesSymbol form={form} x={12} y={0} />
          <text x={30} dy="0.35em" fill="var(--text)">
            {label}
          </text>
        </g>
      ))}
    </g>
  )
}
