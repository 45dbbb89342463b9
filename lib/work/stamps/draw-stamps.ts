import type { Recipe } from '@/lib/science/imaging/recipe'
import { renderViews, type BandPlane } from '@/lib/science/imaging/render-views'
import { encodePng } from './encode-png'
import { bandPlane, readHeldPlane } from './read-cutout'
import type { StampWriter } from './stamp-store'
import type { PreviewMade, PreviewTask, StampMade } from './worker-tasks'

/** The recipe's views of planes that are read now, stored nowhere. */
export async function drawPreview({ planes, recipe }: PreviewTask): Promise<PreviewMade> {
  const read: BandPlane[] = []
  for (const held of planes) {
    const cutout = await readHeldPlane(held)
    if (cutout === null) return { lost: held.file.name }
    read.push(bandPlane(cutout))
  }
  const views = renderViews(read, recipe).map((view) => ({
    key: view.key,
    width: view.width,
    height: view.height,
    note: view.note,
    png: encodePng(view),
  }))
  return { views }
}

/** Renders the recipe's views and has each stored as a PNG at native resolution. */
export function drawStamps(planes: BandPlane[], recipe: Recipe, stamps: StampWriter): StampMade[] {
  return renderViews(planes, recipe).map((view) => {
    const stored = stamps.add(encodePng(view))
    return { view: view.key, ...stored, width: view.width, height: view.height, note: view.note }
  })
}
