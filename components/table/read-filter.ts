import type { ColumnCondition } from '@/lib/work/catalogue/table-input'
import { CoordinateError, parseDeclination, parseRightAscension } from '@/lib/science/sky/coordinates'
import { parseDateRange } from './date-range'
import { parseNumberRange } from './number-range'
import type { ColumnFilterKind } from './table-column'
import { chosenOf } from './table-state'

/** What was typed into a filter: what it asks for, or a sentence that says what is wrong with it. */
export type ReadFilter = { condition: ColumnCondition } | { problem: string }

/** Nothing is asked by blank text. A filter with a problem lets everything pass, and its field says so. */
export function readFilter(kind: ColumnFilterKind, text: string): ReadFilter | null {
  const plain = text.trim()
  if (plain === '') return null
  if (typeof kind !== 'string') return readChoice(kind, plain)
  if (kind !== 'text') {
    if (/^none$/i.test(plain)) return { condition: { kind: 'missing' } }
    if (/^any$/i.test(plain)) return { condition: { kind: 'present' } }
  }
  switch (kind) {
    case 'text': {
      const parts = plain
        .split(',')
        .map((part) => part.trim())
        .filter(Boolean)
      return parts.length > 0 ? { condition: { kind: 'contains', parts } } : null
    }
    case 'range':
      return readNumbers(plain)
    case 'date':
      return readDates(plain)
    case 'ra':
    case 'dec':
      return readAngles(kind, plain)
  }
}

function readChoice(choices: readonly string[], text: string): ReadFilter | null {
  const values = chosenOf(text).filter((choice) => choices.includes(choice))
  return values.length > 0 ? { condition: { kind: 'among', values } } : null
}

function readNumbers(text: string): ReadFilter {
  const range = parseNumberRange(text)
  if (!range) return { problem: `“${text}” is no range of numbers. Write >= 2, < 0.5, 1..3, 2.5, none or any.` }
  if (range.least > range.most) {
    return { problem: `${text} runs from the larger number to the smaller: write ${range.most}..${range.least}.` }
  }
  const { least, most, above, below } = range
  return { condition: { kind: 'range', least: finite(least), most: finite(most), above, below } }
}

const finite = (value: number) => (Number.isFinite(value) ? value : null)

function readDates(text: string): ReadFilter {
  const range = parseDateRange(text)
  if (!range) {
    return {
      problem: `“${text}” is no day or range of days. Write 2026-11-03, 2026-11, >= 2026-11 or 2026-10..2026-11.`,
    }
  }
  if (range.from !== null && range.before !== null && range.from >= range.before) {
    return { problem: `${text} ends before it begins: write the earlier day first.` }
  }
  return { condition: { kind: 'range', least: range.from, most: range.before, below: true } }
}

const EXAMPLE = { ra: '150..151, 10h..10h30m or 359..1', dec: '-2..2, >= +30 or -01:30..00:00' }

function readAngles(axis: 'ra' | 'dec', text: string): ReadFilter {
  const plain = text.replaceAll('−', '-')
  const parse = axis === 'ra' ? parseRightAscension : parseDeclination
  const unclear = { problem: `“${text}” is no range. Write ${EXAMPLE[axis]}.` }
  const [lowest, highest] = axis === 'ra' ? [0, 360] : [-90, 90]
  try {
    const beyond = /^(>=|<=|≥|≤|>|<)\s*(.+)$/.exec(plain)
    if (beyond) {
      const [, sign, angle] = beyond
      const strict = sign === '>' || sign === '<'
      return /[>≥]/.test(sign)
        ? { condition: { kind: 'range', least: parse(angle), most: highest, above: strict } }
        : { condition: { kind: 'range', least: lowest, most: parse(angle), below: strict } }
    }
    const ends = plain.split(/\s*(?:\.\.|…|\bto\b)\s*/)
    if (ends.length === 2 && (ends[0] || ends[1])) {
      const from = ends[0] ? parse(ends[0]) : lowest
      // 360 is the end of the turn here, not its beginning.
      const to = ends[1] && !(axis === 'ra' && /^360(\.0*)?$|^24h$/.test(ends[1])) ? parse(ends[1]) : highest
      if (axis === 'ra') return { condition: { kind: 'turn', from, to } }
      return from <= to
        ? { condition: { kind: 'range', least: from, most: to } }
        : { problem: `${text} runs from north to south: write the southern end first.` }
    }
    const alone = parseNumberRange(plain)
    if (!alone || !(alone.most > lowest && alone.least < highest)) return unclear
    return { condition: { kind: 'range', least: alone.least, most: alone.most, below: true } }
  } catch (error) {
    if (error instanceof CoordinateError) return { problem: error.message }
    throw error
  }
}
