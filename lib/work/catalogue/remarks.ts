export interface Remark {
  /** A pseudonym. */
  by: string
  remark: string
}

/** Before each further line of a remark, so that none can begin as a remark of somebody else. */
const FURTHER = '  '

/** `pseudonym: remark`, a line each; further lines of a remark are indented. */
export function remarksInText(remarks: readonly { by: string; remark: string | null }[]): string {
  return remarks.map(({ by, remark }) => `${by}: ${(remark ?? '').replaceAll(/\r\n?|\n/g, `\n${FURTHER}`)}`).join('\n')
}

export function remarksFromText(text: string | null): Remark[] {
  const remarks: Remark[] = []
  for (const line of text?.split('\n') ?? []) {
    const start = line.startsWith(FURTHER) ? null : /^([^:]*): (.*)$/s.exec(line)
    if (start || remarks.length === 0) remarks.push({ by: start?.[1] ?? '', remark: start?.[2] ?? line })
    else remarks[remarks.length - 1].remark += `\n${line.slice(FURTHER.length)}`
  }
  return remarks
}
