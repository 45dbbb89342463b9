import type { FitsHeader } from '@/lib/science/fits/fits-types'

/** Keywords that may name what is in the middle of a cutout. Common practice, no one source. */
const NAME_KEYWORDS = ['OBJECT', 'OBJNAME', 'OBJ_ID', 'TARGNAME', 'TARGET', 'SRCNAME', 'SOURCE']

const EMPTY_WORDS = /^(unknown|none|null|n\/?a|undefined|object|-+|0)$/i

/** The name a header gives, and by which keyword. OBJECT often names the survey tile: whoever asks must allow for that. */
export function candidateOfHeaders(headers: readonly FitsHeader[]): { keyword: string; name: string } | null {
  for (const keyword of NAME_KEYWORDS) {
    for (const header of headers) {
      const value = header[keyword]
      if (typeof value !== 'string') continue
      const name = value.trim()
      if (name !== '' && name.length <= 100 && !EMPTY_WORDS.test(name)) return { keyword, name }
    }
  }
  return null
}
