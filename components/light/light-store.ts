/**
 * Light of one person in one campaign, outside React: sliders write into it and the canvas reads from it sixty times a second
 * without anything being rendered. React listens only to the few facts that change what is on the page.
 */
import {
  familyOf,
  isPlain,
  PLAIN_LIGHT,
  PLAIN_VIEW,
  settingsFrom,
  type LightSettings,
  type Limit,
  type ViewLight,
} from './light-settings'
import { Zoom } from './zoom'

/** The picture that is drawn now, for whoever shows its limits. */
export interface DrawnView {
  view: string
  colour: boolean
  bands: readonly string[]
  /** The recipe's own for this picture. */
  own: { black: number; white: number; softening: number }
}

/** `still`: this view is not made of planes, and its picture stays. */
export type LightStatus = 'waiting' | 'live' | 'still' | { failed: string }

const SAVE_AFTER_MS = 300

export class LightStore {
  readonly zoom = new Zoom()
  open = false
  /** Whether the settings stay for the next candidate. */
  keep = true
  /** Whether the close field of view is shown, where the scale is known, or the whole cutout. */
  close = false
  settings: LightSettings = PLAIN_LIGHT
  drawn: DrawnView | null = null
  status: LightStatus = 'waiting'
  private focusNext = false
  /** Steps asked of the first slider before its panel was here. */
  private held: number[] = []
  /** Asked of a picture that is not drawn yet. */
  private waiting: (() => void)[] = []
  private readonly listeners = new Set<() => void>()
  private saving: ReturnType<typeof setTimeout> | undefined
  private candidate: number | null = null

  constructor(private readonly storageName: string) {}

  /** Reads what this browser remembers; apart from the constructor because a page drawn on the server has no storage. */
  load(): void {
    try {
      const stored = JSON.parse(localStorage.getItem(this.storageName) ?? 'null') as Record<string, unknown> | null
      if (!stored) return
      this.open = stored.open === true
      this.keep = stored.keep !== false
      this.close = stored.close === true
      this.settings = settingsFrom(stored.settings)
      this.tell()
    } catch {
      // Unreadable or forbidden storage: the recipe's own picture.
    }
  }

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener)
    return () => this.listeners.delete(listener)
  }

  get touched(): boolean {
    return !isPlain(this.settings)
  }

  /** Whether pixels are wanted at all. */
  get inUse(): boolean {
    return this.open || this.touched
  }

  limitsOf(view: string): ViewLight {
    return this.settings.views[familyOf(view)] ?? PLAIN_VIEW
  }

  setLimit(view: string, limit: Limit, value: number): void {
    const changed = { ...this.limitsOf(view), [limit]: value }
    this.change({ views: { ...this.settings.views, [familyOf(view)]: changed } })
  }

  change(part: Partial<LightSettings>): void {
    this.settings = { ...this.settings, ...part }
    this.changed()
  }

  setOpen(open: boolean, byKey = false): void {
    this.open = open
    this.focusNext = open && byKey
    this.held = []
    this.changed()
  }

  /** Whether the panel that opens now takes the focus, because it was asked for by key. Once. */
  takeFocus(): boolean {
    const asked = this.focusNext
    this.focusNext = false
    return asked
  }

  /** Keeps steps for the slider that is to take the focus; false where none is. */
  hold(steps: number): boolean {
    if (this.focusNext) this.held.push(steps)
    return this.focusNext
  }

  takeHeld(): number[] {
    return this.held.splice(0)
  }

  /** Does it once this candidate's picture is drawn, now where it is; never where it cannot be. */
  whenDrawn(step: () => void): void {
    if (this.drawn) step()
    else this.waiting.push(step)
  }

  setKeep(keep: boolean): void {
    this.keep = keep
    this.changed()
  }

  setClose(close: boolean): void {
    this.close = close
    this.zoom.reset()
    this.changed()
  }

  reset(): void {
    this.settings = PLAIN_LIGHT
    this.zoom.reset()
    this.changed()
  }

  /** Another candidate is looked at: whole again, and by the recipe where the light is not to stay. */
  show(candidate: number | null): void {
    if (candidate === this.candidate) return
    const first = this.candidate === null
    this.candidate = candidate
    this.zoom.reset()
    this.drawn = null
    this.status = 'waiting'
    this.waiting = []
    if (!this.keep && !first) this.settings = PLAIN_LIGHT
    this.changed()
  }

  setStatus(status: LightStatus, drawn: DrawnView | null): void {
    this.status = status
    this.drawn = drawn
    const asked = status === 'waiting' ? [] : this.waiting.splice(0)
    if (drawn) for (const step of asked) step()
    this.tell()
  }

  private changed(): void {
    this.tell()
    clearTimeout(this.saving)
    this.saving = setTimeout(() => this.save(), SAVE_AFTER_MS)
  }

  private tell(): void {
    for (const listener of this.listeners) listener()
  }

  private save(): void {
    try {
      const { open, keep, close } = this
      const settings = keep ? this.settings : PLAIN_LIGHT
      localStorage.setItem(this.storageName, JSON.stringify({ open, keep, close, settings }))
    } catch {
      // No storage: the choice lasts as long as the page.
    }
  }
}
