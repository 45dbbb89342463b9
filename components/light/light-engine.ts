/** Draws one candidate's views on one canvas as Light says, at most once a frame. */
import type { DecodedPlanes } from '@/lib/science/imaging/plane-codec'
import { viewSheet, viewSource, type ViewSheet, type ViewSource } from '@/lib/science/imaging/view-sheet'
import type { LightStore } from './light-store'
import { painter, type SheetPainter } from './sheet-painter'

export class LightEngine {
  private planes: DecodedPlanes | null = null
  private view = ''
  private readonly sources = new Map<string, ViewSource | null>()
  private readonly sheets = new Map<string, { weights: string; sheet: ViewSheet }>()
  private frame: number | null = null
  private readonly context: CanvasRenderingContext2D | null
  private readonly stop: () => void

  constructor(
    private readonly canvas: HTMLCanvasElement,
    private readonly light: LightStore,
    private readonly by: SheetPainter = painter,
  ) {
    this.context = canvas.getContext('2d', { alpha: false })
    let settings = light.settings
    this.stop = light.subscribe(() => {
      if (settings === light.settings) return
      settings = light.settings
      this.frame ??= requestAnimationFrame(() => this.draw())
    })
  }

  dispose(): void {
    this.stop()
    if (this.frame !== null) cancelAnimationFrame(this.frame)
  }

  setPlanes(planes: DecodedPlanes): void {
    this.planes = planes
    this.draw()
  }

  /** At once, so that a picture and its canvas never show two views. */
  show(view: string): void {
    this.view = view
    this.draw()
  }

  private draw(): void {
    if (this.frame !== null) cancelAnimationFrame(this.frame)
    this.frame = null
    const { planes, view, light, context } = this
    if (!planes || view === '') return
    const sheet = context && this.sheetOf(planes, view)
    if (!sheet) {
      this.canvas.hidden = true
      light.setStatus('still', null)
      return
    }
    if (this.canvas.width !== sheet.width || this.canvas.height !== sheet.height) {
      this.canvas.width = sheet.width
      this.canvas.height = sheet.height
    }
    const { black, white, softening } = light.limitsOf(view)
    const { curve, invert } = light.settings
    this.by.paint(context, sheet, {
      blackSigma: black ?? sheet.blackSigma,
      whiteSigma: white ?? sheet.whiteSigma,
      softeningSigma: softening ?? sheet.softeningSigma,
      curve,
      invert,
    })
    this.canvas.dataset.view = view
    this.canvas.hidden = false
    const own = { black: sheet.blackSigma, white: sheet.whiteSigma, softening: sheet.softeningSigma }
    const { drawn } = light
    // White follows the weights.
    if (drawn?.view !== view || drawn.own.white !== own.white || light.status !== 'live') {
      const bands = planes.planes.flatMap(({ role, band }) => (role === 'band' ? band : []))
      light.setStatus('live', { view, colour: sheet.colour, bands, own })
    }
  }

  private sheetOf(planes: DecodedPlanes, view: string): ViewSheet | null {
    let source = this.sources.get(view)
    if (source === undefined) {
      source = viewSource(view, planes.planes, planes.recipe)
      this.sources.set(view, source)
    }
    if (!source) return null
    const factors = this.light.settings.weights
    const weights = source.mixed ? JSON.stringify(factors) : ''
    const made = this.sheets.get(view)
    if (made?.weights === weights) return made.sheet
    const own = planes.recipe.weights ?? {}
    const bands = planes.planes.map(({ band }) => [band, (own[band] ?? 1) * (factors[band] ?? 1)] as const)
    const sheet = viewSheet(source, { ...planes.recipe, weights: Object.fromEntries(bands) })
    this.sheets.set(view, { weights, sheet })
    return sheet
  }
}
