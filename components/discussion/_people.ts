import type { Thread } from '@/lib/work/discussion/read-thread'

const AT = '2026-12-01T12:00:00.000Z'

/** For tests: a discussion as a lead reads it. */
export const THREAD: Thread = {
  messages: [
    {
      id: 1,
      by: 'curlew',
      own: false,
      at: AT,
      parts: [
        { kind: 'mention', label: 'avocet', you: true },
        { kind: 'text', text: ', see <b>this</b>: ' },
        { kind: 'link', href: 'https://marsh.test/atlas' },
      ],
    },
    { id: 2, by: 'avocet', own: true, at: AT, parts: [{ kind: 'text', text: 'A ring.' }] },
  ],
  mentionable: [
    { label: 'curlew', lead: false, reads: true },
    { label: 'curlew sandpiper', lead: false, reads: false },
    { label: 'dunlin', lead: true, reads: true },
  ],
  mayWrite: true,
}
