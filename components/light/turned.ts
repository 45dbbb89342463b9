/**
 * How a picture that is shown turned is drawn: by quarters counter-clockwise, mirrored left to right first from 4 on. Undefined where
 * it is shown as it is. Transforms of a list are applied from its end.
 */
export function turnedStyle(turned: number | undefined): { transform: string } | undefined {
  if (!turned) return undefined
  const steps = [
    ...(turned % 4 > 0 ? [`rotate(${-90 * (turned % 4)}deg)`] : []),
    ...(turned >= 4 ? ['scaleX(-1)'] : []),
  ]
  return { transform: steps.join(' ') }
}
