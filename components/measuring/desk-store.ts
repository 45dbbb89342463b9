/**
 * The desk outside React: a drag writes into it sixty times a second, and only what is drawn of it renders. Every act can be undone;
 * a drag is one act.
 */
import type { SkyVector } from '@/lib/science/lensing/sis'
import { deskFrom, emptyDesk, measuredOf, type DeskState, type Given, type Measured } from './desk-state'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'

const MOST_UNDONE = 200

export class DeskStore {
  private state: DeskState
  private past: Measured[] = []
  private readonly listeners = new Set<() => void>()

  constructor(
    readonly given: Given,
    fieldArcsec: number,
  ) {
    this.state = emptyDesk(given, fieldArcsec)
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener)
    return () => this.listeners.delete(listener)
  }

  readonly get = (): DeskState => this.state

  get canUndo(): boolean {
    return this.past.length > 0
  }

  /** What needs no undo: modes, choices, the cross. */
  set(change: Partial<DeskState>): void {
    this.state = { ...this.state, ...change }
    for (const listener of this.listeners) listener()
  }

  /** Before a drag: what its many changes come back to. */
  begin(): void {
    this.past = [...this.past.slice(1 - MOST_UNDONE), measuredOf(this.state)]
  }

  act(change: Partial<DeskState>): void {
    this.begin()
    this.set(change)
  }

  undo(): void {
    const before = this.past.pop()
    if (before) this.set(before)
  }

  /** A kept measurement to look at; what lies on the desk stays under it. */
  open(kept: MeasurementShown): void {
    this.set({ mode: kept.kind === 'model' ? 'model' : 'arc', opened: kept })
  }

  /** The desk as that measurement was made, to go on from. */
  goOnFrom(kept: MeasurementShown): void {
    this.begin()
    this.set(deskFrom(this.state, kept, this.given))
  }

  close(): void {
    this.set({ mode: 'off', opened: null, marking: false, wide: false })
  }

  moveCross(cross: SkyVector): void {
    this.set({ cross })
  }
}
