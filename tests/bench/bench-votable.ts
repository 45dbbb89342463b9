/**
 * A catalogue of a million rows to VOTable, beside the peer script votable.py in the same run, and read back.
 * Both start from rows in memory and end with a file on disk.
 */
import { createReadStream, createWriteStream, mkdtempSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { pipeline } from 'node:stream/promises'
import type { Column } from '@/lib/science/formats/columns'
import { readVotable } from '@/lib/science/formats/read-votable'
import { csvDocument } from '@/lib/science/formats/write-csv'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'
import { votableBinary2Document } from '@/lib/science/formats/write-votable-binary2'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { designation } from '@/lib/science/sky/designation'
import { askPeer, duration } from '@/tests/bench/_peer'

const COUNT = 1_000_000

interface Lens {
  designation: string
  ra: number
  dec: number
  outcome: string
  spread: number
  graders: number
  radius: number
  dispersion: number
}

const COLUMNS: Column<Lens>[] = [
  {
    name: 'designation',
    datatype: 'char',
    ucd: 'meta.id;meta.main',
    description: 'Name',
    value: (lens) => lens.designation,
  },
  {
    name: 'ra',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.ra;meta.main',
    description: 'ICRS',
    value: (lens) => lens.ra,
  },
  {
    name: 'dec',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.dec;meta.main',
    description: 'ICRS',
    value: (lens) => lens.dec,
  },
  { name: 'outcome', datatype: 'char', ucd: 'meta.code.class', description: 'Outcome', value: (lens) => lens.outcome },
  {
    name: 'spread',
    datatype: 'double',
    ucd: 'stat.stdev',
    description: 'Spread of grades',
    value: (lens) => lens.spread,
  },
  { name: 'n_graders', datatype: 'int', ucd: 'meta.number', description: 'Graders', value: (lens) => lens.graders },
  {
    name: 'theta_e',
    datatype: 'double',
    unit: 'arcsec',
    ucd: 'phys.angSize',
    description: 'Radius',
    value: (lens) => lens.radius,
  },
  { name: 'sigma', datatype: 'double', unit: 'km/s', description: 'Dispersion', value: (lens) => lens.dispersion },
]

const META: VotableMeta = { tableName: 'catalogue', description: 'Invented lenses, to measure speed', infos: [] }

export async function benchVotable(): Promise<string[]> {
  const lenses = inventedLenses()
  const folder = mkdtempSync(path.join(tmpdir(), 'ringside-bench-'))
  const file = (name: string) => path.join(folder, name)
  const lines: string[] = []
  try {
    const ours = await timed(() =>
      pipeline(votableDocument(META, COLUMNS, lenses), createWriteStream(file('table.vot'))),
    )
    lines.push(`votable: ${COUNT} rows to TABLEDATA: ${duration(ours)}, ${perSecond(ours)}, ${size(file('table.vot'))}`)
    const binary = await timed(() =>
      pipeline(votableBinary2Document(META, COLUMNS, lenses), createWriteStream(file('binary2.vot'))),
    )
    lines.push(
      `votable: ${COUNT} rows to BINARY2: ${duration(binary)}, ${perSecond(binary)}, ${size(file('binary2.vot'))}`,
    )
    await pipeline(csvDocument(COLUMNS, lenses), createWriteStream(file('table.csv')))
    const peer = askPeer('votable.py', file('table.csv'), file('peer.vot'))
    if ('skipped' in peer) lines.push(`votable: ${peer.skipped}`)
    else {
      const theirs = (COUNT / Number.parseFloat(peer.answer.split(',')[1])) * 1000
      lines.push(`votable: the peer says '${peer.answer}': Ringside is ${(theirs / ours).toFixed(1)} times as fast`)
    }
    for (const name of ['table.vot', 'binary2.vot']) {
      let rows = 0
      const reading = await timed(async () => {
        rows = (await readVotable(createReadStream(file(name), { highWaterMark: 2 ** 18 }))).rowCount
      })
      lines.push(`votable: ${rows} rows of ${name} read: ${duration(reading)}, ${perSecond(reading)}`)
    }
    return lines
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

async function timed(work: () => Promise<void>): Promise<number> {
  const started = performance.now()
  await work()
  return performance.now() - started
}

function perSecond(milliseconds: number): string {
  return `${Math.round((COUNT / milliseconds) * 1000)} rows/s`
}

function size(file: string): string {
  return `${Math.round(statSync(file).size / 1e6)} MB`
}

function inventedLenses(): Lens[] {
  const random = new SeededRandom(1)
  return Array.from({ length: COUNT }, (_, k) => {
    const ra = random.between(0, 360)
    const dec = random.between(-90, 90)
    return {
      designation: designation('SWS', ra, dec),
      ra,
      dec,
      outcome: ['confirmed', 'probable', 'possible'][k % 3],
      spread: random.uniform(),
      graders: random.integer(2, 9),
      radius: random.between(0.5, 3),
      dispersion: random.between(150, 400),
    }
  })
}
