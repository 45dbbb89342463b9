/**
 * What settling a split is worth. Pure.
 *
 * By reliability: the bits that a sure answer tells, the entropy of its probability of a lens: 1 where a lens is as probable as
 * not, 0 where there is no doubt left. By the mean, which knows no probability: how deep the mean lies between the two
 * thresholds, in points, below 0 outside them; of equals the wider spread. The score of the machine search is left out: its
 * worth is what the verdicts are to tell (our choice, no source).
 */
import { binaryEntropyBits } from '@/lib/science/agreement/next-look'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'

/** By what the list of splits is sorted. */
export const SPLIT_ORDERS = ['worth', 'mean', 'spread', 'waiting', 'name'] as const
export type SplitOrder = (typeof SPLIT_ORDERS)[number]

export function splitOrderOf(text: unknown): SplitOrder {
  return SPLIT_ORDERS.find((order) => order === text) ?? 'worth'
}

export interface WorthOf {
  /** of a lens, by the live estimate; null by the mean */
  probability: number | null
  /** grade points; null without a grade */
  mean: number | null
  spread: number | null
}

/** Thresholds of the mean method, in points; null by reliability. */
export type MeanThresholds = { confirmMean: number; setAsideMean: number } | null

/** Larger first; null where there is no grade to go by, which comes last. */
export function worthOf(split: WorthOf, thresholds: MeanThresholds): number | null {
  if (!thresholds) return split.probability === null ? null : binaryEntropyBits(split.probability)
  if (split.mean === null) return null
  return Math.min(split.mean - thresholds.setAsideMean, thresholds.confirmMean - split.mean)
}

/** 'worth 0.97 bit', '0.40 from a threshold', 'split by spread alone' */
export function worthInWords(split: WorthOf, thresholds: MeanThresholds): string {
  const worth = worthOf(split, thresholds)
  if (worth === null) return thresholds ? 'no grade to go by' : 'no probability yet'
  if (!thresholds) return `worth ${probabilityBeside(worth)} bit`
  return worth < 0 ? 'split by spread alone' : `${worth.toFixed(2)} from a threshold`
}
