/** `aim below 5 ms: met`, or by how much it is missed. */
export function againstAim(value: number, most: number, unit: string): string {
  const met = value < most ? 'met' : `NOT MET, ${value.toFixed(1)} ${unit}`
  return `aim below ${most} ${unit}: ${met}`
}

/** `aim at least 5 times: met` */
export function aimAtLeast(value: number, least: number, unit: string): string {
  return `aim at least ${least} ${unit}: ${value >= least ? 'met' : `NOT MET, ${value.toFixed(1)}`}`
}
