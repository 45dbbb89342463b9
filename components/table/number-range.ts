export interface NumberRange {
  least: number
  most: number
  /** Ends that do not belong to it. */
  above?: boolean
  below?: boolean
}

const NUMBER = String.raw`[+-]?(?:\d+(?:\.\d*)?|\.\d+)`
const BETWEEN = new RegExp(`^(${NUMBER})?\\s*(?:\\.\\.|…|to)\\s*(${NUMBER})?$`)
const BEYOND = new RegExp(`^(>=|<=|≥|≤|>|<)\\s*(${NUMBER})$`)
const ALONE = new RegExp(`^${NUMBER}$`)

/**
 * A range as people type it: `2..3`, `2..`, `..3`, `2 to 3`, `>2`, `≥ 2`, `<=3`. A number alone stands for the values that
 * are written like it: `2.5` is 2.45 to 2.55, `4` is 3.5 to 4.5.
 * @returns null for anything else.
 */
export function parseNumberRange(text: string): NumberRange | null {
  const plain = text.trim().replaceAll('−', '-')
  if (ALONE.test(plain)) {
    const half = 0.5 * 10 ** -(plain.split('.')[1]?.length ?? 0)
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

export function isInRange(range: NumberRange, value: number): boolean {
  const fromBelow = range.above ? value > range.least : value >= range.least
  return fromBelow && (range.below ? value < range.most : value <= range.most)
}
