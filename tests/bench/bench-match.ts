/**
 * A million positions against a million within 2 arcsec by the function matchPositions, beside the peer script match.py in the same
 * run. A campaign is matched with a list by cones in SQLite instead, which bench-cone times.
 */
import { createWriteStream, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { once } from 'node:events'
import { conePositions, nearestPositions } from '@/lib/science/sky/cone-positions'
import { matchPositions, type PositionPairs } from '@/lib/science/sky/match-positions'
import { indexPositions, type Positions } from '@/lib/science/sky/position-index'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { askPeer, askPython, duration } from '@/tests/bench/_peer'

const COUNT = 1_000_000
const RADIUS_ARCSEC = 2

const PAIRS_IN_PYTHON = `
import sys, astropy.units as u, numpy as np
from astropy.coordinates import SkyCoord
a, b = (SkyCoord(*np.loadtxt(p, delimiter=",", skiprows=1, unpack=True), unit="deg") for p in sys.argv[1:3])
in_b, in_a, *_ = a.search_around_sky(b, float(sys.argv[3]) * u.arcsec)
order = np.lexsort((in_b, in_a))
np.stack([in_a[order], in_b[order]]).astype("<u4").tofile(sys.argv[4])
`

export async function benchMatch(): Promise<string[]> {
  const lines: string[] = []
  const { a, b } = twoSurveys()
  const folder = mkdtempSync(path.join(tmpdir(), 'ringside-bench-'))
  try {
    const started = performance.now()
    const pairs = matchPositions(a, b, RADIUS_ARCSEC)
    const ours = performance.now() - started
    lines.push(
      `match: ${COUNT} against ${COUNT} within ${RADIUS_ARCSEC} arcsec, ${pairs.first.length} pairs, by matchPositions in memory (a campaign against a list in SQLite: see cone): ${duration(ours)}`,
    )
    const files = [path.join(folder, 'a.csv'), path.join(folder, 'b.csv')]
    await writePositions(files[0], a)
    await writePositions(files[1], b)
    const peer = askPeer('match.py', ...files, String(RADIUS_ARCSEC))
    if ('skipped' in peer) return [...lines, `match: ${peer.skipped}`, ...cones(a, b)]
    const theirs = Number.parseFloat(peer.answer) * 1000
    lines.push(`match: the peer says '${peer.answer}': Ringside is ${(theirs / ours).toFixed(1)} times as fast`)
    lines.push(`match: ${samePairs(pairs, files, path.join(folder, 'pairs'))}`)
    return [...lines, ...cones(a, b)]
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

function cones(a: Positions, b: Positions): string[] {
  const index = indexPositions(b)
  const times: number[] = []
  for (let k = 0; k < 10_000; k++) {
    const started = performance.now()
    conePositions(index, { raDeg: a.raDeg[k], decDeg: a.decDeg[k] }, 60)
    times.push(performance.now() - started)
  }
  times.sort((x, y) => x - y)
  const started = performance.now()
  nearestPositions(a, index)
  return [
    `match: a cone of 1 arcmin in ${COUNT}: median ${(times[5000] * 1000).toFixed(0)} µs, p99 ${(times[9900] * 1000).toFixed(0)} µs`,
    `match: the nearest of ${COUNT} for each of ${COUNT}: ${duration(performance.now() - started)}`,
  ]
}

/** All sky; half of the second list are the first list's positions with an error of 1 arcsec on each axis. */
function twoSurveys(): { a: Positions; b: Positions } {
  const random = new SeededRandom(20261201)
  const list = (): Positions => ({ raDeg: new Float64Array(COUNT), decDeg: new Float64Array(COUNT) })
  const [a, b] = [list(), list()]
  for (let k = 0; k < COUNT; k++) {
    for (const one of [a, b]) {
      one.raDeg[k] = random.uniform() * 360
      one.decDeg[k] = (Math.asin(2 * random.uniform() - 1) * 180) / Math.PI
    }
    if (k % 2 === 0) continue
    const error = { east: random.normal() / 3600, north: random.normal() / 3600 }
    b.raDeg[k] = a.raDeg[k] + error.east / Math.cos((a.decDeg[k] * Math.PI) / 180)
    b.decDeg[k] = Math.max(-90, Math.min(90, a.decDeg[k] + error.north))
  }
  return { a, b }
}

async function writePositions(file: string, { raDeg, decDeg }: Positions): Promise<void> {
  const stream = createWriteStream(file)
  let text = 'ra,dec\n'
  for (let k = 0; k < raDeg.length; k++) {
    text += `${raDeg[k]},${decDeg[k]}\n`
    if (text.length < 2 ** 20) continue
    if (!stream.write(text)) await once(stream, 'drain')
    text = ''
  }
  stream.end(text)
  await once(stream, 'finish')
}

function samePairs(pairs: PositionPairs, files: string[], out: string): string {
  const asked = askPython(PAIRS_IN_PYTHON, ...files, String(RADIUS_ARCSEC), out)
  if ('skipped' in asked) return asked.skipped
  const bytes = readFileSync(out)
  const theirs = new Uint32Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.length))
  const count = pairs.first.length
  const isSame =
    theirs.length === 2 * count &&
    pairs.first.every((place, k) => place === theirs[k]) &&
    pairs.second.every((place, k) => place === theirs[count + k])
  return isSame ? `the same ${count} pairs, each of them` : 'THE PAIRS DIFFER from those of astropy'
}
