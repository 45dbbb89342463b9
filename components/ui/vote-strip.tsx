/**
 * A candidate's grades at a glance, the same wherever they stand: four cells from A to N, one dot a grade, and beside them how
 * many could not judge. Brightness is certainty; the letters carry it too. On cells of 18 % letters reach 4.5:1 and the rings of dots
 * 3:1 in both themes.
 */
export interface Votes {
  A: number
  B: number
  C: number
  N: number
  U: number
}

const CELLS = [
  { letter: 'A', dot: 'bg-grade-a', cell: 'bg-grade-a/18' },
  { letter: 'B', dot: 'bg-grade-b', cell: 'bg-grade-b/18' },
  { letter: 'C', dot: 'bg-grade-c', cell: 'bg-grade-c/18' },
  { letter: 'N', dot: 'bg-grade-n', cell: 'bg-grade-n/18' },
] as const

/** More dots than this do not fit a narrow cell and are written as a number. */
const MOST_DOTS = 4

export function describeVotes(votes: Votes): string {
  const parts = CELLS.filter(({ letter }) => votes[letter] > 0).map(({ letter }) => `${votes[letter]} ${letter}`)
  if (votes.U) parts.push(`${votes.U} cannot judge`)
  return parts.length ? `Grades: ${parts.join(', ')}` : 'No grades yet'
}

/** `dense` is for rows of a table: smaller dots in cells of one width, so that the letters stand below each other. */
export function VoteStrip({ votes, dense = false }: { votes: Votes; dense?: boolean }) {
  const pad = dense ? 'px-0.5' : 'gap-1 px-1'
  const size = dense ? 'size-1.5' : 'size-2'
  return (
    <div role="img" aria-label={describeVotes(votes)} className="flex items-center gap-1.5">
      <div className={`grid grid-cols-4 gap-0.5 ${dense ? 'w-50 shrink-0' : 'min-w-44 flex-1'}`}>
        {CELLS.map(({ letter, dot, cell }) => (
          <div key={letter} className={`flex h-[1.375rem] items-center ${pad} ${cell}`}>
            <span className="w-2.5 text-[0.6875rem] leading-none text-text">{letter}</span>
            <span className={`flex flex-1 items-center justify-center ${dense ? 'gap-px' : 'gap-0.5'}`}>
              {votes[letter] > MOST_DOTS ? (
                <span className="figures text-note leading-none">{votes[letter]}</span>
              ) : (
                Array.from({ length: votes[letter] }, (_, index) => (
                  <i key={index} className={`${size} rounded-full ring-1 ring-text/70 ${dot}`} />
                ))
              )}
            </span>
          </div>
        ))}
      </div>
      {votes.U || dense ? (
        <span className={`figures text-note text-mute ${dense ? 'w-6 text-left' : ''}`}>
          {votes.U ? `+${votes.U}?` : ''}
        </span>
      ) : null}
    </div>
  )
}
