/**
 * Names for calibration stamps, drawn like the survey's own, so that a name tells nothing. Pure. Numbered names fall into gaps of the
 * numbers where there are gaps, else just behind the last; names that are coordinates are made of the stamp's own position.
 */
import { designation } from '@/lib/science/sky/designation'
import type { SkyPosition } from '@/lib/science/sky/separation'
import type { SeededRandom } from '@/lib/science/lensing/seeded-random'

const COORDINATES = /^(.*?)J(\d{6})(?:\.(\d+))?([+-]\d{6})(?:\.(\d+))?(.*)$/
const NUMBERED = /^(.*?)(\d+)([^\d]*)$/

/** So many numbers behind the last are drawn from, for each stamp that is made. */
const BEHIND = 3
const TRIES = 40

/**
 * Names to try in this order; the first that is free is taken.
 * @param known names of the campaign's candidates, or enough of them. @param stamps how many are being made.
 */
export function proposeNames(
  known: readonly string[],
  position: SkyPosition | null,
  stamps: number,
  random: SeededRandom,
): string[] {
  const like = coordinateName(known, position)
  const own = like === null ? [] : [like]
  return [...own, ...numberedNames(known, stamps, random)]
}

function coordinateName(known: readonly string[], position: SkyPosition | null): string | null {
  if (position === null) return null
  const found = known.map((name) => COORDINATES.exec(name)).filter((match) => match !== null)
  if (2 * found.length <= known.length) return null
  const [, before, , raDecimals = '', , decDecimals = '', after] = found[0]
  const made = designation('XXX', position.raDeg, position.decDeg, {
    raDecimals: Math.min(4, raDecimals.length),
    decDecimals: Math.min(4, decDecimals.length),
  })
  return `${before}${made.replace(/^XXX /, '')}${after}`
}

function numberedNames(known: readonly string[], stamps: number, random: SeededRandom): string[] {
  const groups = new Map<string, { before: string; after: string; digits: string[] }>()
  for (const name of known) {
    const match = NUMBERED.exec(name)
    // Numbers beyond what a double holds are no running numbers.
    if (!match || match[2].length > 15) continue
    const [, before, digits, after] = match
    const key = `${before}\n${after}`
    const group = groups.get(key) ?? { before, after, digits: [] }
    group.digits.push(digits)
    groups.set(key, group)
  }
  const commonest = [...groups.values()].sort((a, b) => b.digits.length - a.digits.length)[0]
  const { before, after, digits } = commonest ?? { before: `${known[0] ?? 'C'}-`, after: '', digits: ['0'] }
  const least = digits.reduce((low, text) => Math.min(low, Number(text)), Number.POSITIVE_INFINITY)
  const most = digits.reduce((high, text) => Math.max(high, Number(text)), 0)
  const width =
    digits[0].startsWith('0') || digits.every(({ length }) => length === digits[0].length) ? digits[0].length : 0
  const taken = new Set(digits.map(Number))
  const within = Array.from({ length: TRIES }, () => random.integer(least, most)).filter((number) => !taken.has(number))
  const behind = Array.from({ length: TRIES }, () => most + random.integer(1, BEHIND * Math.max(1, stamps)))
  const last = Array.from({ length: TRIES }, (_, k) => most + BEHIND * Math.max(1, stamps) + 1 + k)
  return [...within, ...behind, ...last].map((number) => `${before}${String(number).padStart(width, '0')}${after}`)
}
