// One 80-character header card: keyword, value, comment (FITS Standard 4.0, section 4).
import type { FitsValue } from '@/lib/science/fits/fits-types'

export interface ParsedCard {
  keyword: string
  /** undefined: the card has no value (commentary, blank, or a keyword without one). */
  value: FitsValue | undefined
  /** True when the value follows section 4.2; false when its text stands in for it. */
  valid: boolean
}

const INTEGER_OR_REAL = /^[+-]?(\d+\.?\d*|\.\d+)([EeDd][+-]?\d+)?$/

/** @param card 80 characters of plain ASCII. */
export function parseCard(card: string): ParsedCard {
  const keyword = card.slice(0, 8).trimEnd().toUpperCase()
  if (keyword === 'HIERARCH' || keyword === 'CONTINUE') return parseConvention(card, keyword)
  const commentary = keyword === '' || keyword === 'COMMENT' || keyword === 'HISTORY' || keyword === 'END'
  if (commentary || card[8] !== '=' || card[9] !== ' ') return { keyword, value: undefined, valid: true }
  return { keyword, ...parseValue(card.slice(10)) }
}

/** HIERARCH (ESO convention, registered with the FITS support office) and CONTINUE (section 4.2.1.2). */
function parseConvention(card: string, keyword: string): ParsedCard {
  if (keyword === 'CONTINUE') return { keyword, ...parseValue(card.slice(8)) }
  const equals = card.indexOf('=')
  if (equals < 0) return { keyword, value: undefined, valid: true }
  return { keyword: card.slice(8, equals).trim().toUpperCase(), ...parseValue(card.slice(equals + 1)) }
}

function parseValue(field: string): { value: FitsValue | undefined; valid: boolean } {
  const start = field.search(/\S/)
  if (start < 0 || field[start] === '/') return { value: undefined, valid: true }
  if (field[start] === "'") return parseQuoted(field, start)
  const slash = field.indexOf('/', start)
  const text = field.slice(start, slash < 0 ? undefined : slash).trimEnd()
  if (text === 'T') return { value: true, valid: true }
  if (text === 'F') return { value: false, valid: true }
  if (!INTEGER_OR_REAL.test(text)) return { value: text, valid: false }
  const number = Number(text.replace(/[Dd]/, 'E'))
  return Number.isFinite(number) ? { value: number, valid: true } : { value: text, valid: false }
}

/** Two quotes in a row stand for one; trailing blanks do not count, leading ones do (section 4.2.1.1). */
function parseQuoted(field: string, start: number): { value: string; valid: boolean } {
  let text = ''
  for (let from = start + 1; ;) {
    const quote = field.indexOf("'", from)
    if (quote < 0) return { value: (text + field.slice(from)).trimEnd(), valid: false }
    text += field.slice(from, quote)
    if (field[quote + 1] !== "'") return { value: text.trimEnd(), valid: true }
    text += "'"
    from = quote + 2
  }
}
