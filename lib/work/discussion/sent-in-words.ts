/** What came of a message: who was written to, and which names nobody has who could read it. */
export function sentInWords({
  mentioned,
  unknown,
}: {
  mentioned: readonly string[]
  unknown: readonly string[]
}): string {
  const sent = mentioned.length > 0 ? `Sent, with a mail to ${mentioned.join(', ')}.` : 'Sent.'
  if (unknown.length === 0) return sent
  const names = unknown.map((name) => `@${name}`).join(' or ')
  return `${sent} No mail went to ${names}: no grader or lead goes by that name here.`
}
