/** Everything that a lens model makes, over the picture. */
import { discOutlines, lensCurves } from '@/lib/science/lensing/critical-curves'
import { lensModel } from '@/lib/science/lensing/sie-shear'
import { pointImages } from '@/lib/science/lensing/sie-shear-images'
import { lineOf, spotOf, type Frame, type Spot } from './frame'
import { Cross, Label, Line, Ring, SkyLine } from './marks'
import { handlesOf, type Grip, type LensAndSource } from './move-lens'

const CURVE_STEPS = 180
const OUTLINE_STEPS = 360

/** Critical curve, caustic, cut, the arcs of a round source, and the images of its middle with their parity. */
export function ModelCurves({
  model,
  sourceRadiusArcsec,
  frame,
  arcsOnly = false,
}: {
  model: LensAndSource
  sourceRadiusArcsec: number
  frame: Frame
  arcsOnly?: boolean
}) {
  const lens = lensModel(model.lens)
  const { critical, caustic, cut } = lensCurves(lens, CURVE_STEPS)
  const arcs = discOutlines(lens, model.source, sourceRadiusArcsec, OUTLINE_STEPS)
    .map(({ outer, inner }) => lineOf(outer, frame) + (inner ? lineOf(inner, frame) : ''))
    .join('')
  if (arcsOnly) return <Line d={arcs} width={1} fill={0.18} />
  return (
    <>
      <Line d={arcs} width={1} fill={0.18} />
      <SkyLine offsets={critical} frame={frame} width={1.5} />
      <SkyLine offsets={caustic} frame={frame} width={1.25} dash="3 3" />
      <SkyLine offsets={cut} frame={frame} width={1} dash="1 4" />
      {pointImages(lens, model.source).map((image) => {
        const at = spotOf(image, frame)
        return (
          <g key={`${image.kind} ${image.east} ${image.north}`}>
            <Line d={`M${at.x - 1} ${at.y - 1}l2 2m0 -2l-2 2`} />
            <Label at={{ x: at.x + 2.6, y: at.y - 1.6 }} text={image.kind === 'minimum' ? '+' : '−'} />
          </g>
        )
      })}
    </>
  )
}

/** What can be dragged: each handle has a shape of its own, and the one held is strong. */
export function ModelHandles({ model, grip, frame }: { model: LensAndSource; grip: Grip; frame: Frame }) {
  const handles = handlesOf(model)
  const spot = (which: Grip) => spotOf(handles[which], frame)
  const [lens, shape, size, shear] = [spot('lens'), spot('shape'), spot('size'), spot('shear')]
  const from = (at: Spot) => `M${lens.x} ${lens.y}L${at.x} ${at.y}`
  const look = (which: Grip) => ({
    width: grip === which ? 2.5 : 1.5,
    className: grip === which ? 'text-lamp' : 'text-white',
  })
  return (
    <>
      <Line d={from(shape)} width={0.75} dash="2 4" />
      {grip === 'shear' ? <Line d={from(shear)} width={0.75} dash="2 4" /> : null}
      <Cross at={lens} strong={grip === 'lens'} />
      <Line d={HANDLE.size(size)} {...look('size')} />
      <Line d={HANDLE.shape(shape)} {...look('shape')} />
      <Line d={HANDLE.shear(shear)} {...look('shear')} />
      <Ring at={spot('source')} size={1.1} strong={grip === 'source'} />
    </>
  )
}

const S = 1.3

/** Square, diamond and triangle. */
const HANDLE = {
  size: ({ x, y }: Spot) => `M${x - S} ${y - S}h${2 * S}v${2 * S}h${-2 * S}Z`,
  shape: ({ x, y }: Spot) =>
    `M${x} ${y - 1.4 * S}l${1.4 * S} ${1.4 * S}l${-1.4 * S} ${1.4 * S}l${-1.4 * S} ${-1.4 * S}Z`,
  shear: ({ x, y }: Spot) => `M${x} ${y - 1.4 * S}l${1.4 * S} ${2.4 * S}h${-2.8 * S}Z`,
}
