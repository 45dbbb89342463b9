export interface DateRange {
  /** Text of a day, `2026-11-03`, as times in UTC begin; null for no end. */
  from: string | null
  /** The first day that is not in it. */
  before: string | null
}

const DAY = String.raw`\d{4}(?:-\d{1,2}(?:-\d{1,2})?)?`
const BETWEEN = new RegExp(`^(${DAY})?\\s*(?:\\.\\.|…|to)\\s*(${DAY})?$`, 'i')
const BEYOND = new RegExp(`^(>=|<=|≥|≤|>|<)\\s*(${DAY})$`)
const ALONE = new RegExp(`^${DAY}$`)

/** Days as people type them: `2026-11-03`, `2026-11`, `2026`, `>= 2026-11`, `2026-10..2026-11`; the ends belong to it. Null for else. */
export function parseDateRange(text: string): DateRange | null {
  const plain = text.trim()
  if (ALONE.test(plain)) return both(plain, plain)
  const beyond = BEYOND.exec(plain)
  if (beyond) {
    const days = both(beyond[2], beyond[2])
    if (!days) return null
    if (beyond[1] === '>') return { from: days.before, before: null }
    if (beyond[1] === '<') return { from: null, before: days.from }
    return /[>≥]/.test(beyond[1]) ? { from: days.from, before: null } : { from: null, before: days.before }
  }
  const between = BETWEEN.exec(plain)
  if (!between || (!between[1] && !between[2])) return null
  return both(between[1], between[2])
}

function both(first: string | undefined, last: string | undefined): DateRange | null {
  const [from, to] = [first ? daysOf(first) : null, last ? daysOf(last) : null]
  if ((first && !from) || (last && !to)) return null
  return { from: from?.[0] ?? null, before: to?.[1] ?? null }
}

/** The first day of a year, a month or a day, and the first one after it; null where the calendar has no such day. */
function daysOf(text: string): [string, string] | null {
  const [year, month, day] = text.split('-').map(Number)
  const first = new Date(Date.UTC(year, (month ?? 1) - 1, day ?? 1))
  if (first.getUTCMonth() !== (month ?? 1) - 1 || first.getUTCDate() !== (day ?? 1)) return null
  const next = new Date(first)
  if (day !== undefined) next.setUTCDate(next.getUTCDate() + 1)
  else if (month !== undefined) next.setUTCMonth(next.getUTCMonth() + 1)
  else next.setUTCFullYear(next.getUTCFullYear() + 1)
  return [first.toISOString().slice(0, 10), next.toISOString().slice(0, 10)]
}
