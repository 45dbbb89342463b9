/** G01, G02, … stand for people in releases. The next one is above all ever given in the campaign, so none is used twice. */
export function nextPseudonym(given: readonly string[]): string {
  const numbers = given.map((pseudonym) => Number(/^G(\d+)$/.exec(pseudonym)?.[1] ?? 0))
  return `G${String(Math.max(0, ...numbers) + 1).padStart(2, '0')}`
}
