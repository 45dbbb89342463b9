// Imaging, from bytes on disk to committed rows and stored stamps, beside the script an astronomer would write and beside two
// floors: the same pictures through the encoder alone. All run in turn, so that a noisy minute hits them all.
import { spawn } from 'node:child_process'
import { mkdir, mkdtemp, readdir, rm, symlink } from 'node:fs/promises'
import { availableParallelism, tmpdir } from 'node:os'
import path from 'node:path'
import sharp from 'sharp'
import { workerCount } from '@/lib/work/stamps/image-pool'
import { readStamp } from '@/lib/work/stamps/stamp-store'
import { imageFolder, median, SAME_FOUR, verdict, writeCutouts, type Run } from './_imaging-run'
import { floorOfOwnEncoder, floorOfSharp, type Picture } from './_encoder-floors'
import { timeOfViews } from './_view-times'

const USUAL = 960
const ROUNDS = 3
/** The aims: so many times the script for its four pictures, and so many times the encoder's floor at most. */
const AIM_PEER = 4
const AIM_FLOOR = 1.5

/** Pixels of every stamp, for the floors. */
async function decodeStamps(folder: string): Promise<Picture[]> {
  const names = (await readdir(folder, { recursive: true, withFileTypes: true })).filter(({ name }) =>
    /^[0-9a-f]{64}$/.test(name),
  )
  const pictures: Picture[] = []
  for (const entry of names) {
    const bytes = await readStamp(folder, entry.name)
    if (bytes === null) throw new Error(`Stamp ${entry.name} is damaged`)
    const { channels: stored = 1 } = await sharp(bytes).metadata()
    const image = stored === 1 ? sharp(bytes).toColourspace('b-w') : sharp(bytes)
    const { data, info } = await image.raw().toBuffer({ resolveWithObject: true })
    const { width, height } = info
    pictures.push({ pixels: data, width, height, channels: info.channels === 1 ? 1 : 3 })
  }
  return pictures
}

interface Rates {
  candidates: number
  runs: Run[]
  own: number[]
  sharp: number[]
}

async function round(cutouts: string, candidates: number, views: string[] | null, rates: Rates | null): Promise<void> {
  let pictures: Picture[] = []
  const run = await imageFolder(cutouts, views, async (folder) => {
    pictures = await decodeStamps(folder)
  })
  if (run.stamps < candidates * SAME_FOUR.length) throw new Error(`Only ${run.stamps} stamps were made`)
  const own = await floorOfOwnEncoder(pictures)
  const bySharp = await floorOfSharp(pictures)
  if (!rates) return
  rates.runs.push(run)
  rates.own.push(candidates / own)
  rates.sharp.push(candidates / bySharp)
}

interface PeerRate {
  rate: number
  /** Milliseconds of processor time a candidate, imports left out. */
  processor: number
}

/** Runs the script as it is, and then prints what processor time it took since its imports. */
const MEASURED = `
import resource, runpy, sys
import numpy, astropy.io.fits, astropy.visualization, PIL.Image
spent = lambda: sum(resource.getrusage(resource.RUSAGE_SELF)[:2])
before = spent()
sys.argv = sys.argv[1:]
runpy.run_path(sys.argv[0], run_name='__main__')
print(f'{spent() - before:.4f} processor seconds')
`

/** The script in so many processes at once, each with its share of the candidates, or why it could not be asked. */
async function runPeers(cutouts: string, processes: number): Promise<PeerRate | string> {
  const script = path.join(process.env.RINGSIDE_PEERS ?? '', 'imaging.py')
  const names = [...new Set((await readdir(cutouts)).map((name) => name.replace(/_[gri]\.fits$/, '')))].sort()
  const folders = await Promise.all(
    Array.from({ length: processes }, async (_, share) => {
      const folder = await mkdtemp(path.join(tmpdir(), 'ringside-peer-'))
      await mkdir(path.join(folder, 'in'))
      for (const name of names.filter((_name, k) => k % processes === share)) {
        for (const band of 'gri')
          await symlink(path.join(cutouts, `${name}_${band}.fits`), path.join(folder, 'in', `${name}_${band}.fits`))
      }
      return folder
    }),
  )
  try {
    const printed = await Promise.all(
      folders.map((folder) => runPython(['-c', MEASURED, script, path.join(folder, 'in'), path.join(folder, 'out')])),
    )
    const failed = printed.find((text) => !/processor seconds/.test(text))
    if (failed !== undefined) return failed.split('\n').at(-1) ?? 'imaging.py printed nothing'
    const sum = (pattern: RegExp) => printed.reduce((total, text) => total + Number(pattern.exec(text)?.[1]), 0)
    // Each says its own rate; side by side they add up.
    return { rate: sum(/([\d.]+) candidates\/s/), processor: (1000 * sum(/([\d.]+) processor/)) / names.length }
  } finally {
    for (const folder of folders) await rm(folder, { recursive: true, force: true })
  }
}

function runPython(argv: string[]): Promise<string> {
  return new Promise((resolve) => {
    const child = spawn(process.env.RINGSIDE_PYTHON ?? '/usr/bin/python3', argv)
    let text = ''
    child.stdout.on('data', (bytes: Buffer) => (text += bytes.toString()))
    child.stderr.on('data', (bytes: Buffer) => (text += bytes.toString()))
    child.on('error', (error) => resolve(`skipped beside imaging.py: ${error.message}`))
    child.on('close', () => resolve(text.trim()))
  })
}

export async function benchImaging(candidates = USUAL): Promise<string[]> {
  const cutouts = await mkdtemp(path.join(tmpdir(), 'ringside-bench-'))
  const four: Rates = { candidates, runs: [], own: [], sharp: [] }
  const all: Rates = { candidates, runs: [], own: [], sharp: [] }
  const alone: (PeerRate | string)[] = []
  const beside: (PeerRate | string)[] = []
  const cores = availableParallelism()
  try {
    await writeCutouts(cutouts, candidates)
    // The first rounds warm up the workers and the disk's cache.
    await round(cutouts, candidates, null, null)
    await round(cutouts, candidates, SAME_FOUR, null)
    for (let count = 0; count < ROUNDS; count++) {
      await round(cutouts, candidates, SAME_FOUR, four)
      alone.push(await runPeers(cutouts, 1))
      await round(cutouts, candidates, null, all)
      beside.push(await runPeers(cutouts, cores))
    }
  } finally {
    await rm(cutouts, { recursive: true, force: true })
  }
  return [
    `imaging, ${candidates} candidates of 3 bands, 80 by 80 pixels, ${workerCount()} workers on ${cores} processors, median of ${ROUNDS} rounds`,
    '  bytes on disk to committed rows and stored stamps; the script reads the same files and writes the same four pictures, 80 by 80, as PNG',
    ...linesOf('the same four pictures', four),
    ...linesOf('all views', all),
    ...peerLines(four, alone, beside, cores),
    ...timeOfViews(),
  ]
}

const rateOf = ({ runs, candidates }: Rates): number => candidates / median(runs.map(({ seconds }) => seconds))

const processorOf = ({ runs, candidates }: Rates): number =>
  median(runs.map(({ processorSeconds }) => (1000 * processorSeconds) / candidates))

function linesOf(name: string, rates: Rates): string[] {
  const rate = rateOf(rates)
  const processor = processorOf(rates)
  const [own, bySharp] = [median(rates.own), median(rates.sharp)]
  const views = rates.runs[0].stamps / rates.candidates
  const against = (floor: number) =>
    `${floor.toFixed(0)} (${(floor / rate).toFixed(2)} times; aim ${AIM_FLOOR}: ${verdict(floor <= AIM_FLOOR * rate)})`
  return [
    `  ${name} (${views}): ${rate.toFixed(0)} candidates/s, ${processor.toFixed(2)} ms of processor time each`,
    `    floor, encoding alone on the same processors: sharp's PNG ${against(bySharp)}, Ringside's own ${against(own)}`,
  ]
}

function peerLines(four: Rates, alone: (PeerRate | string)[], beside: (PeerRate | string)[], cores: number): string[] {
  const skipped = [...alone, ...beside].find((rate) => typeof rate === 'string')
  if (skipped !== undefined) return [`  ${skipped}`]
  const rate = rateOf(four)
  const line = (rates: (PeerRate | string)[], what: string) => {
    const measured = rates.filter((one) => typeof one !== 'string')
    const peer = median(measured.map((one) => one.rate))
    const processor = median(measured.map((one) => one.processor))
    const times = rate / peer
    const text = `  imaging.py, ${what}: ${peer.toFixed(0)} candidates/s, ${processor.toFixed(2)} ms of processor time each; Ringside is ${times.toFixed(1)} times as fast, for ${(processorOf(four) / processor).toFixed(2)} of the processor time`
    return { text, times }
  }
  const one = line(alone, 'as it is, in one process')
  return [
    `${one.text} (aim ${AIM_PEER} times: ${verdict(one.times >= AIM_PEER)})`,
    line(beside, `in ${cores} processes at once`).text,
  ]
}
