// npm run simulate: looks per candidate that the product's own queue, rule and model take, against six looks each and against Wald's
// number, with simulated graders. Options choose less of it:
//   npm run simulate -- --candidates 2000 --share 0.02 --pool mixed --seed 7 --passes 1 --stamps 40
// The table and the plot are written to fixtures/simulate/ by a whole run, or wherever --out names a folder.
import { mkdir, writeFile } from 'node:fs/promises'
import path from 'node:path'
import { parseArgs } from 'node:util'
import { GRADER_POOLS, type GraderPool } from '@/lib/science/agreement/simulated-graders'
import { compareDesigns, type DesignComparison } from './compare-designs'
import { looksPlot } from './looks-plot'
import { looksTable, shortfalls } from './looks-table'

const { values } = parseArgs({
  options: {
    candidates: { type: 'string', default: '10000' },
    share: { type: 'string' },
    pool: { type: 'string' },
    seed: { type: 'string', default: '1' },
    graders: { type: 'string', default: '20' },
    stamps: { type: 'string', default: '100' },
    passes: { type: 'string', default: '3' },
    'least-grades': { type: 'string', default: '1' },
    out: { type: 'string' },
  },
})

function numberFrom(name: 'candidates' | 'seed' | 'graders' | 'stamps' | 'passes' | 'least-grades'): number {
  const number = Number(values[name])
  if (Number.isSafeInteger(number) && number >= 0) return number
  console.error(`--${name} is a whole number, not ${values[name]}.`)
  process.exit(2)
}

const pools = values.pool === undefined ? GRADER_POOLS : GRADER_POOLS.filter((pool) => pool === values.pool)
if (pools.length === 0) {
  console.error(`No graders are called ${values.pool}; there are: ${GRADER_POOLS.join(', ')}.`)
  process.exit(2)
}
const shares = values.share === undefined ? [0.02, 0.2] : [Number(values.share)]
if (!shares.every((share) => share > 0 && share < 1)) {
  console.error('--share is a share of lenses between 0 and 1, such as 0.02.')
  process.exit(2)
}
const sizes = {
  candidates: numberFrom('candidates'),
  graders: numberFrom('graders'),
  calibrationStamps: numberFrom('stamps'),
  seed: numberFrom('seed'),
}

const started = performance.now()
const comparisons: DesignComparison[] = []
console.log(
  `${sizes.candidates.toLocaleString('en')} candidates, ${sizes.calibrationStamps} calibration stamps, ${sizes.graders} graders, seed ${sizes.seed}`,
)
for (const lensShare of shares) for (const pool of pools) comparisons.push(await compare(lensShare, pool))
const table = looksTable(comparisons)
console.log(`\n${table}\n`)
const short = comparisons.flatMap((one) =>
  shortfalls(one).map((words) => `${100 * one.scenario.lensShare} % lenses, ${one.scenario.pool} graders: ${words}`),
)
console.log(short.length > 0 ? `Short of the aim:\n${short.join('\n')}` : 'Every aim is met.')
console.log(`${((performance.now() - started) / 1000).toFixed(0)} s in all`)
const isWhole = values.share === undefined && values.pool === undefined
const out = values.out ?? (isWhole ? 'fixtures/simulate' : null)
if (out) {
  await mkdir(out, { recursive: true })
  await writeFile(path.join(out, 'looks.svg'), looksPlot(comparisons))
  await writeFile(path.join(out, 'looks.md'), `${table}\n`)
  console.log(`Written: ${path.join(out, 'looks.svg')}, ${path.join(out, 'looks.md')}`)
}

async function compare(lensShare: number, pool: GraderPool): Promise<DesignComparison> {
  const comparison = await compareDesigns(
    { ...sizes, lensShare, pool },
    {
      passes: numberFrom('passes'),
      leastGrades: numberFrom('least-grades'),
      onPass: (pass, played, isMatched) =>
        console.log(
          `  pass ${pass}: ${played.looksPerCandidate.toFixed(3)} looks, completeness ${played.completeness.toFixed(3)}, ` +
            `purity ${played.purity?.toFixed(3) ?? 'none'}, ${played.undecided} undecided, ${played.runs} runs, ` +
            `${played.seconds.toFixed(0)} s${isMatched ? '' : ', not matched'}`,
        ),
    },
  )
  const { ofFixed, ofWald, pureOfFixed, rule } = comparison
  console.log(
    `${100 * lensShare} % lenses, ${pool} graders: ${ofFixed.toFixed(3)} of six looks (without database ${pureOfFixed.toFixed(3)}), ` +
      `${ofWald.toFixed(2)} times Wald's number; rule: false confirmed ${rule.falseConfirmed.toExponential(2)}, missed ${rule.missedLens.toFixed(3)}`,
  )
  return comparison
}
