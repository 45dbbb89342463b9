import { gzipSync } from 'node:zlib'
import { orientPlanes } from '@/lib/science/imaging/orient-planes'
import { encodePlanes, type PlaneToEncode } from '@/lib/science/imaging/plane-codec'
import { bandPlane, readHeldPlane, type Cutout } from './read-cutout'
import type { PlanesMade, PlanesTask } from './worker-tasks'

/** Reads the planes out of their files, turned as the pictures are, and codes them, gzipped at level 5: level 9 takes three times as long for 1 % less. */
export async function codePlanes({ planes, recipe }: PlanesTask): Promise<PlanesMade> {
  const cutouts: Cutout[] = []
  for (const held of planes) {
    const cutout = await readHeldPlane(held)
    if (cutout === null) return { lost: held.file.name }
    cutouts.push(cutout)
  }
  const turned = orientPlanes(cutouts.map(bandPlane), recipe.northUp === true).planes
  const read: PlaneToEncode[] = turned.map(({ band, width, height, data, pixelScaleArcsec }, k) => {
    const { background, noise } = cutouts[k].plane
    return { band, width, height, data, background, noise, pixelScaleArcsec: pixelScaleArcsec ?? null }
  })
  return { bytes: new Uint8Array(gzipSync(encodePlanes(read, recipe), { level: 5 })) }
}
