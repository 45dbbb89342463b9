/**
 * The reason of a verdict without what each grade said: 'Confirmed: the probability of a lens is 0.97, at or above 0.95.' The
 * reason by reliability goes on with every grade and its weight; pages show those as a sum, and graders see nobody's numbers
 * but their own.
 */
export function reasonInShort(reason: string): string {
  return reason.split(' Before any grade it was ')[0]
}
