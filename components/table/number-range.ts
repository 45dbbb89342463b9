export interface NumberRange {
  least: number
  most: number
  /** Ends that do not belong to it. */
  above?: boolean
  below?: boolean
}

const NUMBER = String.raw`[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:e[+-]?\d{1,3})?`
const BETWEEN = new RegExp(`^(${NUMBER})?\\s*(?:\\.\\.|…|to)\\s*(${NUMBER})?$`, 'i')
const BEYOND = new RegExp(`^(>=|<=|≥|≤|>|<)\\s*(${NUMBER})$`, 'i')
const ALONE = new RegExp(`^${NUMBER}$`, 'i')

/**
 * A range as people type it: `2..3`, `2..`, `..3`, `2 to 3`, `>2`, `≥ 2`, `<=3`, `< 1e-3`. A number alone stands for the values
 * that are written like it: `2.5` is 2.45 to 2.55, `4` is 3.5 to 4.5.
 * @returns null for anything else. A range from a larger number to a smaller one is given as written, and holds nothing.
 */
export function parseNumberRange(text: string): NumberRange | null {
  const plain = text.trim().replaceAll('−', '-')
  if (ALONE.test(plain)) {
    const [digits, exponent = '0'] = plain.toLowerCase().split('e')
    const half = 0.5 * 10 ** (Number(exponent) - (digits.split('.')[1]?.length ?? 0))
    return { least: Number(plain) - half, most: Number(plain) + half, below: true }
  }
  const beyond = BEYOND.exec(plain)
  if (beyond) {
    const [, sign, number] = beyond
    const strict = sign === '>' || sign === '<'
    return /[>≥]/.test(sign)
      ? { least: Number(number), most: Infinity, above: strict }
      : { least: -Infinity, most: Number(number), below: strict }
  }
  const between = BETWEEN.exec(plain)
  if (!between || (between[1] === undefined && between[2] === undefined)) return null
  return { least: Number(between[1] ?? -Infinity), most: Number(between[2] ?? Infinity) }
}
