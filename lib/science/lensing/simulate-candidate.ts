import { SALTMARSH_WIDE_SURVEY, type SurveyModel } from './survey-model'

export type { SurveyModel } from './survey-model'

export type SimulatedKind =
  | 'lens-arc'
  | 'lens-ring'
  | 'lens-quad'
  | 'lens-double'
  | 'lens-group'
  | 'spiral'
  | 'ring-galaxy'
  | 'merger'
  | 'edge-on'
  | 'star-spikes'
  | 'satellite-trail'
  | 'elliptical'

export interface SimulatedCandidate {
  kind: SimulatedKind
  isLens: boolean
  /** Shortest wavelength first; row 0 is the bottom row. */
  bands: { band: string; data: Float32Array }[]
  width: number
  height: number
  pixelScaleArcsec: number
  /** Null for what is not a lens. */
  einsteinRadiusArcsec: number | null
  /** 0 easy to 1 hard. */
  difficulty: number
}

export function simulateCandidate(
  kind: SimulatedKind,
  seed: number,
  survey: SurveyModel = SALTMARSH_WIDE_SURVEY,
): SimulatedCandidate {
  const { width, height, pixelScaleArcsec } = survey
  const isLens = kind.startsWith('lens-')
  const bands = survey.bands.map(({ band, skyNoise }) => {
    const data = new Float32Array(width * height)
    for (let i = 0; i < data.length; i++) {
      const dx = (i % width) - width / 2
      const dy = Math.floor(i / width) - height / 2
      data[i] = 200 * Math.exp(-(dx * dx + dy * dy) / 50) + skyNoise * Math.sin((i + 1) * (seed + 1) * 12.9898)
    }
    return { band, data }
  })
  return {
    kind,
    isLens,
    bands,
    width,
    height,
    pixelScaleArcsec,
    einsteinRadiusArcsec: isLens ? 1.5 : null,
    difficulty: 0.5,
  }
}
