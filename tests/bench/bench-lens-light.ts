/**
 * Lens-light removal measured on simulated candidates whose light is known without noise, side by side with two usual ways:
 * the image minus itself turned by 180 degrees about the galaxy's centre, and the isophote model of photutils
 * (isophote_model.py beside this file; skipped when Debian's python3-photutils is not there).
 *
 * By method and band, where A is the lensed light, L the central galaxy's, M what the method takes off:
 * - kept: 1 - sum(M - L) / sum(A) over pixels with A above half the sky noise. Above 1: galaxy light left there.
 * - core: root mean square of (data - M - A - others) over its expected noise within 3 pixels of the centre; 1 is perfect.
 * - S/N: sum(A R) / sqrt(sum(A^2)) over the root mean square of the residual R out to 5 pixels beyond it, where A and others are
 *   below the noise: how far the lensed light stands out in the picture, leftovers of the galaxy counting as noise.
 */
import { spawnSync } from 'node:child_process'
import path from 'node:path'
import { subtractLensLight } from '@/lib/science/imaging/lens-light'
import { findCore } from '@/lib/science/imaging/lens-light/find-core'
import { normalisePlane, type BandPlane } from '@/lib/science/imaging/normalise-planes'
import {
  simulateWithTruth,
  type SimulatedCandidate,
  type SimulatedKind,
  type TrueLight,
} from '@/lib/science/lensing/simulate-candidate'
import { SALTMARSH_WIDE_SURVEY } from '@/lib/science/lensing/survey-model'

const LENS_KINDS: SimulatedKind[] = ['lens-arc', 'lens-ring', 'lens-quad', 'lens-double', 'lens-group']
const SEED = 7000

interface Case {
  candidate: SimulatedCandidate
  truth: TrueLight[]
  planes: BandPlane[]
  centre: { x: number; y: number }
}

/** Light taken off, by band. */
type Models = Float32Array[]

type Method = { name: string; models: (Models | null)[] }

/** 200 lenses, 40 of each kind, and 50 ellipticals with and without neighbours but without arcs. */
export async function benchLensLight({ perKind = 40, arcless = 50 } = {}): Promise<string[]> {
  const cases = [
    ...LENS_KINDS.flatMap((kind) => Array.from({ length: perKind }, (_, k) => makeCase(kind, SEED + k))),
    ...Array.from({ length: arcless }, (_, k) => makeCase('elliptical', SEED + k)),
  ]
  const ours = cases.map(ourModels)
  const cpuMs = timePerBand(cases)
  const isophotes = isophoteModels(cases)
  const methods: Method[] = [
    { name: 'Ringside', models: ours },
    { name: 'rotated 180', models: cases.map(rotatedModels) },
    ...(typeof isophotes === 'string' ? [] : [{ name: 'isophotes', models: isophotes }]),
  ]
  return [
    `Lens-light removal: ${LENS_KINDS.length * perKind} lenses, ${arcless} galaxies without arcs, 80 x 80 pixels; median (10th | 90th percentile)`,
    `processor time of Ringside: ${cpuMs.toFixed(2)} ms a band`,
    ...(typeof isophotes === 'string' ? [isophotes] : []),
    row('kind', 'method', 'band', 'kept', 'core', 'S/N of lensed light', 'made'),
    ...[...LENS_KINDS, 'elliptical' as const].flatMap((kind) => table(kind, cases, methods)),
    ...table('all lenses', cases, methods),
  ]
}

function makeCase(kind: SimulatedKind, seed: number): Case {
  const { candidate, truth } = simulateWithTruth(kind, seed)
  const { width, height } = candidate
  const planes = candidate.bands.map(({ band, data }) => ({ band, width, height, data }))
  const core = findCore(planes.map(normalisePlane))
  return { candidate, truth, planes, centre: core ?? { x: (width - 1) / 2, y: (height - 1) / 2 } }
}

function ourModels({ planes }: Case): Models {
  const { model } = subtractLensLight(planes)
  return planes.map((plane) => model?.light[plane.band] ?? new Float32Array(plane.data.length))
}

/** The image turned by half a turn about the centre to the nearest half pixel, which moves pixels exactly. */
function rotatedModels({ planes, centre }: Case): Models {
  const twiceX = Math.round(2 * centre.x)
  const twiceY = Math.round(2 * centre.y)
  return planes.map(({ data, width, height }) =>
    data.map((_, i) => {
      const x = twiceX - (i % width)
      const y = twiceY - Math.floor(i / width)
      return x >= 0 && x < width && y >= 0 && y < height ? data[y * width + x] : 0
    }),
  )
}

/** Models by photutils, null where its fit failed; a sentence when photutils is not there. */
function isophoteModels(cases: Case[]): (Models | null)[] | string {
  const script = path.join(import.meta.dirname, 'isophote_model.py')
  const header = Buffer.from(
    JSON.stringify(cases.map(({ centre, candidate }) => ({ ...centre, bands: candidate.bands.length }))) + '\n',
  )
  const pixels = cases.flatMap(({ planes }) =>
    planes.map(({ data }) => Buffer.from(data.buffer, data.byteOffset, data.byteLength)),
  )
  const run = spawnSync(process.env.RINGSIDE_PYTHON ?? '/usr/bin/python3', [script], {
    input: Buffer.concat([header, ...pixels]),
    maxBuffer: 1 << 30,
    env: { ...process.env, OMP_NUM_THREADS: '1' },
  })
  if (run.error || run.status !== 0) {
    const reason = run.error?.message ?? String(run.stderr).trim().split('\n').at(-1)
    return `isophotes: skipped, python3-photutils did not run (${reason})`
  }
  const size = cases[0].planes[0].data.length
  const values = new Float32Array(
    run.stdout.buffer.slice(run.stdout.byteOffset, run.stdout.byteOffset + run.stdout.length),
  )
  let at = 0
  return cases.map(({ planes }) => {
    const models = planes.map(() => values.slice(at, (at += size)))
    return models.some((model) => Number.isNaN(model[0])) ? null : models
  })
}

function timePerBand(cases: Case[]): number {
  for (const one of cases.slice(0, 40)) ourModels(one)
  const start = process.cpuUsage()
  for (const one of cases) ourModels(one)
  const { user, system } = process.cpuUsage(start)
  return (user + system) / 1000 / (cases.length * cases[0].planes.length)
}

function table(kind: SimulatedKind | 'all lenses', cases: Case[], methods: Method[]): string[] {
  const chosen = cases.flatMap(({ candidate }, k) =>
    (kind === 'all lenses' ? candidate.isLens : candidate.kind === kind) ? [k] : [],
  )
  return methods.flatMap(({ name, models }) =>
    SALTMARSH_WIDE_SURVEY.bands.map(({ band }, bandIndex) => {
      const measured = chosen.flatMap((k) => {
        const made = models[k]
        return made === null ? [] : [measure(cases[k], made[bandIndex], bandIndex)]
      })
      const isLens = kind !== 'elliptical'
      return row(
        kind,
        name,
        band,
        isLens
          ? spread(
              measured.map(({ kept }) => 100 * kept),
              0,
              ' %',
            )
          : '-',
        spread(
          measured.map(({ core }) => core),
          2,
          '',
        ),
        isLens
          ? spread(
              measured.map(({ signal }) => signal),
              1,
              '',
            )
          : '-',
        `${measured.length}/${chosen.length}`,
      )
    }),
  )
}

function measure({ planes, truth, centre }: Case, model: Float32Array, bandIndex: number) {
  const { data, width } = planes[bandIndex]
  const { central, lensed, others } = truth[bandIndex]
  const { skyNoise, electronsPerFlux } = SALTMARSH_WIDE_SURVEY.bands[bandIndex]
  const distance = (i: number) => Math.hypot((i % width) - centre.x, Math.floor(i / width) - centre.y)
  let taken = 0
  let light = 0
  let squares = 0
  let count = 0
  let product = 0
  let template = 0
  let reach = 0
  for (let i = 0; i < data.length; i++) {
    if (lensed[i] > 0.5 * skyNoise) {
      taken += model[i] - central[i]
      light += lensed[i]
      reach = Math.max(reach, distance(i))
    }
    product += lensed[i] * (data[i] - model[i])
    template += lensed[i] ** 2
    if (distance(i) > 3) continue
    const variance = skyNoise ** 2 + Math.max(0, central[i] + lensed[i] + others[i]) / electronsPerFlux
    squares += (data[i] - model[i] - lensed[i] - others[i]) ** 2 / variance
    count++
  }
  let noise = 0
  let quiet = 0
  for (let i = 0; i < data.length; i++) {
    if (distance(i) > reach + 5 || lensed[i] > 0.2 * skyNoise || others[i] > 0.5 * skyNoise) continue
    noise += (data[i] - model[i]) ** 2
    quiet++
  }
  return {
    kept: 1 - taken / light,
    core: Math.sqrt(squares / count),
    signal: quiet >= 20 ? product / Math.sqrt(template) / Math.sqrt(noise / quiet) : Number.NaN,
  }
}

function spread(values: number[], digits: number, unit: string): string {
  const sorted = values.filter((value) => Number.isFinite(value)).sort((a, b) => a - b)
  const at = (share: number) => sorted[Math.round(share * (sorted.length - 1))]?.toFixed(digits) ?? '-'
  return `${at(0.5)}${unit} (${at(0.1)} | ${at(0.9)})`
}

const WIDTHS = [12, 12, 5, 20, 20, 24, 8]

const row = (...cells: string[]): string =>
  cells
    .map((cell, k) => cell.padEnd(WIDTHS[k]))
    .join(' ')
    .trimEnd()
