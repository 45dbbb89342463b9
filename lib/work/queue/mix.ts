/**
 * What stands at the places of a person's queue: ordinary candidates, and mixed in among them calibration stamps and own candidates
 * that come back. Each place is drawn for itself, so gaps are geometric and nothing can be foretold from what came before. Pure.
 */
import type { PlaceDraw } from './person-stream'

export interface Shares {
  calibration: number
  repeat: number
}

export type PlaceKind = 'stamp' | 'repeat' | 'ordinary'

export function kindOf({ kind }: PlaceDraw, { calibration, repeat }: Shares): PlaceKind {
  if (kind < calibration) return 'stamp'
  return kind < calibration + repeat ? 'repeat' : 'ordinary'
}

export interface Supplies<T> {
  ordinary: readonly T[]
  /** In an order that does not change from one asking to the next. */
  stamps: readonly T[]
  /** Own candidates that have come back before and wait for an answer: they come first where one is due, in this order. */
  waiting?: readonly T[]
  repeats: readonly T[]
}

export interface Mixed<T> {
  kind: PlaceKind
  item: T
}

/**
 * The next `count` of a queue from `place` on. Where what was drawn has run out, an ordinary one comes; where ordinary ones have run
 * out the queue ends: nobody is kept for calibration alone.
 */
export function mix<T>(
  supplies: Supplies<T>,
  drawAt: (place: number) => PlaceDraw,
  place: number,
  count: number,
  shares: Shares,
): Mixed<T>[] {
  const ordinary = [...supplies.ordinary]
  const rest = { stamp: [...supplies.stamps], repeat: [...supplies.repeats] }
  const waiting = [...(supplies.waiting ?? [])]
  const mixed: Mixed<T>[] = []
  while (mixed.length < count && ordinary.length > 0) {
    const draw = drawAt(place + mixed.length)
    const kind = kindOf(draw, shares)
    const from = kind === 'ordinary' ? [] : rest[kind]
    if (kind === 'repeat' && waiting.length > 0) mixed.push({ kind, item: waiting.shift()! })
    else if (from.length === 0) mixed.push({ kind: 'ordinary', item: ordinary.shift()! })
    else mixed.push({ kind, item: from.splice(Math.floor(draw.pick * from.length), 1)[0] })
  }
  return mixed
}

/** Places ahead that are looked at one by one; beyond them the shares are enough. */
const LOOKED_AT = 5000

export interface LeftToMix {
  ordinary: number
  stamps: number
  /** Own candidates that may come back now. */
  repeats: number
  /** Of the newest first looks, the oldest first, whether they may come back once they are far enough behind. */
  recent: readonly boolean[]
  /** So many first looks must lie between. */
  between: number
}

/**
 * How many stamps and repeats are still to come among the ordinary candidates that are left: place by place, so that what is left
 * falls by one with each look, whatever the look was at.
 */
export function mixedAhead(
  left: LeftToMix,
  drawAt: (place: number) => PlaceDraw,
  place: number,
  shares: Shares,
): number {
  let [ordinary, stamps, repeats, ahead] = [left.ordinary, left.stamps, left.repeats, 0]
  const recent = [...left.recent]
  const look = (mayComeBack: boolean) => {
    recent.push(mayComeBack)
    if (recent.length > left.between && recent.shift()) repeats++
  }
  for (let k = 0; k < LOOKED_AT && ordinary > 0; k++) {
    const kind = kindOf(drawAt(place + k), shares)
    if (kind === 'stamp' && stamps > 0) {
      stamps--
      ahead++
      look(false)
    } else if (kind === 'repeat' && repeats > 0) {
      repeats--
      ahead++
    } else {
      ordinary--
      look(true)
    }
  }
  const { calibration, repeat } = shares
  const ordinaryShare = 1 - calibration - repeat
  const expected = (share: number) => Math.round((ordinary * share) / ordinaryShare)
  return ahead + Math.min(stamps, expected(calibration)) + expected(repeat)
}
