// npm run bench: speed as ratios in one run, against scripts of fixtures/peers and against floors. Never part of the check.
// A word after it chooses, a number a smaller size where a benchmark takes one: npm run bench -- intake 300
import { availableParallelism, totalmem } from 'node:os'
import { closeImagePool } from '@/lib/work/stamps/image-pool'
import { benchCone } from './bench-cone'
import { benchConeSearch } from './bench-cone-search'
import { benchConsensus } from './bench-consensus'
import { benchImaging } from './bench-imaging'
import { benchImagingScale } from './bench-imaging-scale'
import { benchIntake } from './bench-intake'
import { benchLens } from './bench-lens'
import { benchLensLight } from './bench-lens-light'
import { benchMatch } from './bench-match'
import { benchMeasuring } from './bench-measuring'
import { benchPage } from './bench-page'
import { benchQueue } from './bench-queue'
import { benchTables } from './bench-tables'
import { benchVotable } from './bench-votable'

const BENCHES: Record<string, (size?: number) => Promise<string[]>> = {
  imaging: benchImaging,
  'imaging-scale': benchImagingScale,
  intake: benchIntake,
  'lens-light': () => benchLensLight(),
  match: benchMatch,
  cone: benchCone,
  votable: benchVotable,
  lens: benchLens,
  measuring: benchMeasuring,
  consensus: benchConsensus,
  'bench-page': benchPage,
  queue: benchQueue,
  'cone-search': benchConeSearch,
  tables: benchTables,
}

process.env.RINGSIDE_PEERS ??= 'fixtures/peers'
process.env.RINGSIDE_PYTHON ??= '/usr/bin/python3'

const words = process.argv.slice(2)
const wanted = words.filter((word) => !/^[1-9]\d*$/.test(word))
const size = words.map(Number).find((number) => number > 0)
const unknown = wanted.filter((name) => !(name in BENCHES))
if (unknown.length) {
  console.error(`No benchmark is called ${unknown.join(', ')}; there are: ${Object.keys(BENCHES).join(', ')}.`)
  process.exit(2)
}
console.log(`${availableParallelism()} processors, ${Math.round(totalmem() / 2 ** 30)} GiB, Node ${process.version}\n`)
for (const [name, bench] of Object.entries(BENCHES)) {
  if (wanted.length && !wanted.includes(name)) continue
  console.log((await bench(size)).join('\n') + '\n')
}
await closeImagePool()
