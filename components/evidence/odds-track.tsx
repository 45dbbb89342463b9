/** One row of the line from set aside to confirmed, drawn over the width of its cell; positions are shares of it. */
export function OddsTrack({
  bounds,
  dot,
  step,
  strong = false,
}: {
  bounds: { confirm: number; setAside: number }
  dot?: number
  step?: { from: number; to: number }
  strong?: boolean
}) {
  const percent = (share: number) => `${(100 * share).toFixed(2)}%`
  const forward = step ? step.to >= step.from : true
  return (
    <svg aria-hidden="true" className="block h-full min-h-12 w-full overflow-visible">
      <rect x="0" y="0" width={percent(bounds.setAside)} height="100%" className="fill-grade-n/30" />
      <rect
        x={percent(bounds.confirm)}
        y="0"
        width={percent(1 - bounds.confirm)}
        height="100%"
        className="fill-grade-a/25"
      />
      {[bounds.setAside, bounds.confirm].map((at) => (
        <line key={at} x1={percent(at)} x2={percent(at)} y1="0" y2="100%" className="stroke-edge" strokeWidth="1" />
      ))}
      {step ? (
        <>
          <line
            x1={percent(step.from)}
            x2={percent(step.to)}
            y1="50%"
            y2="50%"
            strokeWidth="3"
            className={forward ? 'stroke-grade-a' : 'stroke-split'}
          />
          <circle cx={percent(step.from)} cy="50%" r="2.5" className="fill-mute" />
          <svg x={percent(step.to)} y="50%" width="1" height="1" className="overflow-visible">
            <path
              d={forward ? 'M 1 0 L -7 -5 L -7 5 Z' : 'M -1 0 L 7 -5 L 7 5 Z'}
              className={forward ? 'fill-grade-a' : 'fill-split'}
            />
          </svg>
        </>
      ) : null}
      {dot === undefined ? null : (
        <circle
          cx={percent(dot)}
          cy="50%"
          r={strong ? 6 : 4}
          strokeWidth="2"
          className={strong ? 'fill-lamp stroke-page' : 'fill-page stroke-text'}
        />
      )}
    </svg>
  )
}

/** Probabilities along the line, at their log odds. */
export function OddsAxis({ ticks }: { ticks: { at: number; label: string; always: boolean }[] }) {
  return (
    <div className="relative h-9 text-[0.6875rem] text-mute">
      {ticks.map(({ at, label, always }) => (
        <span
          key={label}
          style={{ left: `${(100 * at).toFixed(2)}%` }}
          className={`figures absolute top-0 -translate-x-1/2 before:mx-auto before:block before:h-1 before:w-px before:bg-edge ${always ? '' : 'max-sm:hidden'}`}
        >
          {label}
        </span>
      ))}
      <span className="absolute inset-x-0 bottom-0 text-center leading-4">probability of a lens</span>
    </div>
  )
}
