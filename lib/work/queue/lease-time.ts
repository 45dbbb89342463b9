/**
 * How long a candidate stays with the person it was lent to. The bench asks again well within it while somebody works there,
 * and gives back when left, so it only runs out after a crash, a lost connection or a long absence.
 */
export const LEASE_MINUTES = 20
export const LEASE_MS = LEASE_MINUTES * 60_000

/** The most that one person can hold at once: three minutes of the quickest work, and what waits in a cut network. */
export const MOST_LENT = 60
