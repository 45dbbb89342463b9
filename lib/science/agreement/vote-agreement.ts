/**
 * How far the votes on one candidate agree, on an ordered scale: to sort splits and to show beside mean and spread.
 *   entropy   -sum of p log2 p, in bits
 *   A         van der Eijk's agreement, from 1 (one category) through 0 (even) to -1 (both ends): C. van der Eijk (2001),
 *             Quality and Quantity 35, 325: the counts are peeled into layers of zeros and ones, each with
 *             A = U (1 - (S - 1) / (K - 1)),  U = ((K - 2) TU - (K - 1) TDU) / ((K - 2) (TU + TDU)),
 *             S categories in use, TU triples 110 and 011, TDU triples 101, weighed by their share of the votes
 *   consensus 1 + sum of p_i log2(1 - |i - mean| / (K - 1)): W. J. Tastle & M. J. Wierman (2007), Int. J. Approximate
 *             Reasoning 45, 531
 * All null for no votes.
 * @throws RangeError on counts that are not finite and 0 or more, or fewer than three categories.
 */

export interface VoteAgreement {
  entropyBits: number | null
  /** -1 to 1 */
  vanDerEijkA: number | null
  /** 0 to 1 */
  consensus: number | null
}

/** @param counts votes in each category, in order. */
export function voteAgreement(counts: readonly number[]): VoteAgreement {
  if (counts.length < 3) throw new RangeError('Agreement on a scale needs three categories or more.')
  if (counts.some((count) => !(count >= 0 && count < Infinity))) {
    throw new RangeError('The counts of votes must be finite and 0 or more.')
  }
  const total = counts.reduce((sum, count) => sum + count, 0)
  if (total === 0) return { entropyBits: null, vanDerEijkA: null, consensus: null }
  const mean = counts.reduce((sum, count, i) => sum + count * i, 0) / total
  let entropyBits = 0
  let consensus = 1
  for (const [i, count] of counts.entries()) {
    if (count === 0) continue
    entropyBits -= (count / total) * Math.log2(count / total)
    consensus += (count / total) * Math.log2(1 - Math.abs(i - mean) / (counts.length - 1))
  }
  return { entropyBits: Math.abs(entropyBits), vanDerEijkA: peel(counts, total), consensus }
}

function peel(counts: readonly number[], total: number): number {
  let left = [...counts]
  let agreement = 0
  while (left.some((count) => count > 0)) {
    const layer = left.map((count) => count > 0)
    const thickness = Math.min(...left.filter((count) => count > 0))
    const share = (thickness * layer.filter(Boolean).length) / total
    agreement += share * agreementOfLayer(layer)
    left = left.map((count) => (count > 0 ? count - thickness : 0))
  }
  return agreement
}

function agreementOfLayer(layer: readonly boolean[]): number {
  const categories = layer.length
  const used = layer.filter(Boolean).length
  if (used === 1) return 1
  let unimodal = 0
  let bimodal = 0
  for (let i = 0; i < categories; i++) {
    for (let j = i + 1; j < categories; j++) {
      for (let k = j + 1; k < categories; k++) {
        if (layer[i] && layer[k] && !layer[j]) bimodal += 1
        else if (layer[j] && layer[i] !== layer[k]) unimodal += 1
      }
    }
  }
  if (unimodal + bimodal === 0) return 0
  const shape = ((categories - 2) * unimodal - (categories - 1) * bimodal) / ((categories - 2) * (unimodal + bimodal))
  return shape * (1 - (used - 1) / (categories - 1))
}
