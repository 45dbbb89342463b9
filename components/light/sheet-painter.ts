/** Puts a sheet on a canvas: by the graphics card where there is WebGL2, else in JavaScript with the same formula. */
import { drawSheet, type DrawOptions } from '@/lib/science/imaging/draw-sheet'
import type { ViewSheet } from '@/lib/science/imaging/view-sheet'
import { makeSheetShader, type SheetShader } from './sheet-shader'

export interface SheetPainter {
  /** In pixels of the sheet, row 0 at the bottom. */
  paint(context: CanvasRenderingContext2D, sheet: ViewSheet, options: DrawOptions): void
}

/** One context of the card for the whole page: browsers allow few, and making one takes longer than drawing a thousand pictures. */
let shader: SheetShader | null | undefined

export const plainPainter: SheetPainter = {
  paint(context, sheet, options) {
    const image = context.createImageData(sheet.width, sheet.height)
    drawSheet(sheet, options, image.data)
    context.putImageData(image, 0, 0)
  },
}

export const painter: SheetPainter = {
  paint(context, sheet, options) {
    if (shader === undefined) shader = makeSheetShader()
    const drawn = shader?.draw(sheet, options)
    if (drawn) context.drawImage(drawn, 0, 0)
    else {
      // A card that is lost may come back: a new context is tried with the next picture.
      if (shader) shader = undefined
      plainPainter.paint(context, sheet, options)
    }
  },
}
