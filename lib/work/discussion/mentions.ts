/**
 * Mentions in plain text. A message keeps them as `@` and a pseudonym, which never changes and is never given twice; each
 * reader sees the name that they may see. Pure.
 */
export interface Named {
  personId: number
  name: string
  pseudonym: string
}

/** Where an @ begins a mention: not within a word, such as an address of e-mail. */
const BEFORE = /[\s([{“"'‘—–/]/
const WORD = /[\p{L}\p{N}_]/u

/** What a writer calls each person: leads by name, where only one has it; everybody by pseudonym. */
export function labelsOf(people: readonly Named[], byName: boolean): { label: string; personId: number }[] {
  const times = new Map<string, number>()
  for (const { name } of people) times.set(name.toLowerCase(), (times.get(name.toLowerCase()) ?? 0) + 1)
  return people.map(({ personId, name, pseudonym }) => ({
    personId,
    label: byName && times.get(name.toLowerCase()) === 1 ? name : pseudonym,
  }))
}

/** What follows an @ that was meant for somebody. */
const WRITTEN = /^[\p{L}\p{N}_]+(?:[.-][\p{L}\p{N}_]+)*/u

/** The text as it is kept, who is mentioned in it, and the names written after an @ that nobody has; each once, in order. */
export function resolveMentions(
  text: string,
  people: readonly Named[],
  byName: boolean,
): { body: string; personIds: number[]; unknown: string[] } {
  const labels = [
    ...labelsOf(people, byName),
    ...people.map(({ personId, pseudonym }) => ({ personId, label: pseudonym })),
  ].sort((a, b) => b.label.length - a.label.length)
  const personIds: number[] = []
  const unknown: string[] = []
  let body = ''
  for (let at = 0; at < text.length; at++) {
    const begins = text[at] === '@' && (at === 0 || BEFORE.test(text[at - 1]))
    const found = begins ? labelAt(text, at + 1, labels) : null
    const person = found && people.find(({ personId }) => personId === found.personId)
    if (!found || !person) {
      const written = begins ? WRITTEN.exec(text.slice(at + 1))?.[0] : undefined
      if (written && !unknown.includes(written)) unknown.push(written)
      body += text[at]
      continue
    }
    body += `@${person.pseudonym}`
    if (!personIds.includes(person.personId)) personIds.push(person.personId)
    at += found.label.length
  }
  return { body, personIds, unknown }
}

function labelAt(
  text: string,
  at: number,
  labels: readonly { label: string; personId: number }[],
): { label: string; personId: number } | null {
  const rest = text.slice(at)
  const found = labels.find(
    ({ label }) => rest.toLowerCase().startsWith(label.toLowerCase()) && !WORD.test(rest[label.length] ?? ' '),
  )
  return found ?? null
}

export type MessagePart =
  { kind: 'text'; text: string } | { kind: 'link'; href: string } | { kind: 'mention'; label: string; you: boolean }

/** Addresses end before punctuation that belongs to the sentence. */
const PIECE = /@[A-Z]\d+|https?:\/\/[^\s<>"“”]*[^\s<>"“”.,;:!?)\]}'’]/g

/**
 * A kept message as its reader sees it: words, links to pages of the web (http and https, nothing else is one), and mentions.
 * @param mentioned the people mentioned in this very message: another `@G07` is text.
 */
export function partsOf(
  body: string,
  mentioned: readonly Named[],
  reader: { personId: number; named: boolean },
): MessagePart[] {
  const parts: MessagePart[] = []
  const say = (text: string) => {
    if (text) parts.push({ kind: 'text', text })
  }
  let done = 0
  for (const match of body.matchAll(PIECE)) {
    const piece = match[0]
    const person = mentioned.find(({ pseudonym }) => piece === `@${pseudonym}`)
    if (piece.startsWith('@') ? !person : !URL.canParse(piece)) continue
    say(body.slice(done, match.index))
    parts.push(
      person
        ? {
            kind: 'mention',
            label: reader.named ? person.name : person.pseudonym,
            you: person.personId === reader.personId,
          }
        : { kind: 'link', href: piece },
    )
    done = match.index + piece.length
  }
  say(body.slice(done))
  return parts
}

/** The same as plain text, for mails and lists. */
export function plainOf(parts: readonly MessagePart[]): string {
  return parts
    .map((part) => (part.kind === 'text' ? part.text : part.kind === 'link' ? part.href : `@${part.label}`))
    .join('')
}
