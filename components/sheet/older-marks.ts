import type { KeptMark } from '@/components/bench/bench-store'
import type { SheetOwner } from './sheet-api'

const MARKS = ['sent on', 'dropped', 'taken back']

/** Marks that were kept before there was a database for them. What cannot be read hides no other. */
export function olderMarks({ slug, personId }: SheetOwner): { marks: KeptMark[]; drop: () => void } {
  const prefix = `ringside:sheet:${slug}:${personId}:`
  const found: { name: string; mark: KeptMark }[] = []
  try {
    const names = Array.from({ length: localStorage.length }, (_, n) => localStorage.key(n) ?? '')
    for (const name of names.filter((one) => one.startsWith(prefix))) {
      const mark = readMark(localStorage.getItem(name))
      if (mark) found.push({ name, mark })
    }
  } catch {
    // Nothing is kept here.
  }
  const drop = () => {
    for (const { name } of found) localStorage.removeItem(name)
  }
  return { marks: found.map(({ mark }) => mark), drop }
}

function readMark(text: string | null): KeptMark | null {
  try {
    const { id, candidate, mark, order } = JSON.parse(text ?? '') as Record<string, unknown>
    const whole = typeof id === 'string' && typeof candidate === 'number' && MARKS.includes(String(mark))
    // Numbered from 1, so before everything that has a time.
    return whole ? { id, candidate, mark: mark as KeptMark['mark'], at: Number(order) || 0 } : null
  } catch {
    return null
  }
}
