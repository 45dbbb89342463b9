/** How close a picture is looked at: a factor, and where its middle lies, in shares of the picture's box from its own middle. */
export const MOST_ZOOM = 8
const STEP = Math.SQRT2

export class Zoom {
  scale = 1
  x = 0
  y = 0
  private readonly listeners = new Set<() => void>()

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener)
    return () => this.listeners.delete(listener)
  }

  /** CSS for the box that holds the pictures. */
  get transform(): string {
    if (this.scale === 1) return 'none'
    return `scale(${this.scale}) translate(${-100 * this.x}%, ${-100 * this.y}%)`
  }

  /** @param x, y the place that stays where it is, in shares of the box from its middle, right and down. */
  by(factor: number, x = 0, y = 0): void {
    const scale = Math.min(MOST_ZOOM, Math.max(1, this.scale * factor))
    const gain = 1 / this.scale - 1 / scale
    this.set(Math.abs(scale - 1) < 0.01 ? 1 : scale, this.x + x * gain, this.y + y * gain)
  }

  step(direction: 1 | -1): void {
    this.by(direction === 1 ? STEP : 1 / STEP)
  }

  /** Moves what is seen, in shares of the box on the screen. */
  pan(x: number, y: number): void {
    this.set(this.scale, this.x + x / this.scale, this.y + y / this.scale)
  }

  reset(): void {
    this.set(1, 0, 0)
  }

  private set(scale: number, x: number, y: number): void {
    const reach = (1 - 1 / scale) / 2
    const hold = (value: number) => Math.max(-reach, Math.min(reach, value)) + 0
    this.scale = scale
    this.x = hold(x)
    this.y = hold(y)
    for (const listener of this.listeners) listener()
  }
}
