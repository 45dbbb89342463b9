/** Fills that differ without colour: the four grades by brightness, others by hatching. */
export type Fill =
  'a' | 'b' | 'c' | 'n' | 'none' | 'plain' | 'rising' | 'dots' | 'level' | 'falling' | 'upright' | 'crossed'

/** For people, in their order; more of them are drawn together. */
export const PEOPLE_FILLS: readonly Fill[] = ['plain', 'rising', 'dots', 'level', 'falling', 'upright', 'crossed']

const GRADES: Partial<Record<Fill, string>> = {
  a: 'var(--grade-a)',
  b: 'var(--grade-b)',
  c: 'var(--grade-c)',
  n: 'var(--grade-n)',
  none: 'var(--well)',
  plain: 'var(--grade-b)',
}

export function fillOf(fill: Fill): { fill: string } {
  return { fill: GRADES[fill] ?? `url(#plot-fill-${fill})` }
}

/** Hatched and empty parts want an edge of their own; plain ones a gap. */
export function isHatched(fill: Fill): boolean {
  return fill === 'none' || GRADES[fill] === undefined
}

const LINES: Partial<Record<Fill, { d: string; turn: number }>> = {
  rising: { d: 'M0 0V6', turn: 45 },
  falling: { d: 'M0 0V6', turn: -45 },
  level: { d: 'M0 3H6', turn: 0 },
  upright: { d: 'M3 0V6', turn: 0 },
  crossed: { d: 'M0 0V6M0 0H6', turn: 45 },
}

export function FillPatterns() {
  return (
    <defs>
      {Object.entries(LINES).map(([fill, line]) => (
        <pattern
          key={fill}
          id={`plot-fill-${fill}`}
          width="6"
          height="6"
          patternUnits="userSpaceOnUse"
          patternTransform={`rotate(${line.turn})`}
        >
          <rect width="6" height="6" fill="var(--raise)" />
          <path d={line.d} stroke="var(--text)" strokeWidth="2" />
        </pattern>
      ))}
      <pattern id="plot-fill-dots" width="6" height="6" patternUnits="userSpaceOnUse">
        <rect width="6" height="6" fill="var(--grade-n)" />
        <circle cx="3" cy="3" r="1.4" fill="var(--text)" />
      </pattern>
    </defs>
  )
}
